import { requireBuild } from '#server/services/access'
import { listPickups } from '#server/services/pickups'

export default apiHandler(async (event) => {
  const sessionId = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', sessionId, 'work')
  return { pickups: await listPickups(db(), sessionId) }
})
