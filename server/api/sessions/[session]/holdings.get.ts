import { requireBuild } from '#server/services/access'
import { countHoldings } from '#server/services/holdings'

export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'run')
  return countHoldings(db(), 'session', session)
})
