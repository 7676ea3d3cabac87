import { requireBuild } from '#server/services/access'
import { buildView } from '#server/services/builds'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  const { build, role } = await requireBuild(db(), account?.id ?? null, 'build', id, 'watch')
  return buildView(build, role)
})
