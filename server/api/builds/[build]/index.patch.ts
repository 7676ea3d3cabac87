import { requireBuild } from '#server/services/access'
import { buildView, changeBuild } from '#server/services/builds'
import { changeBuildSchema } from '#shared/schemas/builds'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  const { role } = await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const change = await readBodyAs(event, changeBuildSchema)
  return buildView(await changeBuild(db(), id, change), role)
})
