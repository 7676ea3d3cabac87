import { requireBuild } from '#server/services/access'
import { listFacts } from '#server/services/facts'

export default apiHandler(async (event) => {
  const buildId = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', buildId, 'work')
  return { facts: await listFacts(db(), { buildId }) }
})
