import { requireBuild } from '#server/services/access'
import { readSession } from '#server/services/sessions'

export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  const access = await requireBuild(db(), account?.id ?? null, 'session', session, 'work')
  return readSession(db(), session, access)
})
