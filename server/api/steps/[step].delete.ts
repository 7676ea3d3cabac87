import { requireBuild } from '#server/services/access'
import { changeStep } from '#server/services/plan'

/** Archives the step: it leaves the lists, and what points at it stays whole. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'step')
  const account = await whoAsks(event)
  const { build } = await requireBuild(db(), account?.id ?? null, 'step', id, 'run')
  return changeStep(db(), build.id, id, { archived: true })
})
