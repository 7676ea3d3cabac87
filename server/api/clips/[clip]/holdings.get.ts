import { requireBuild } from '#server/services/access'
import { countHoldings } from '#server/services/holdings'

export default apiHandler(async (event) => {
  const clip = routeId(event, 'clip')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'clip', clip, 'run')
  return countHoldings(db(), 'clip', clip)
})
