import { requireBuild } from '#server/services/access'
import { countHoldings } from '#server/services/holdings'

export default apiHandler(async (event) => {
  const build = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', build, 'run')
  return countHoldings(db(), 'build', build)
})
