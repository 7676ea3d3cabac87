import { requireBuild } from '#server/services/access'
import { readBench } from '#server/services/bench'

export default apiHandler(async (event) => {
  const account = await whoAsks(event)
  const { build, role } = await requireBuild(db(), account?.id ?? null, 'build', routeId(event, 'build'), 'work')
  return readBench(db(), build, role!)
})
