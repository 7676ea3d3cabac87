import { requireBuild } from '#server/services/access'
import { listFacts } from '#server/services/facts'

export default apiHandler(async (event) => {
  const sessionId = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', sessionId, 'work')
  return { facts: await listFacts(db(), { sessionId }) }
})
