import { requireBuild } from '#server/services/access'
import { listSessions } from '#server/services/sessions'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  const { build, role } = await requireBuild(db(), account?.id ?? null, 'build', id, 'work')
  return { build: { id: build.id, name: build.name, units: build.units }, role, sessions: await listSessions(db(), id) }
})
