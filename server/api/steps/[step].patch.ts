import { requireBuild } from '#server/services/access'
import { changeStep } from '#server/services/plan'
import { changeStepSchema } from '#shared/schemas/plan'

/** Changes what is given; `archived: false` brings the step back. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'step')
  const account = await whoAsks(event)
  const { build } = await requireBuild(db(), account?.id ?? null, 'step', id, 'run')
  const change = await readBodyAs(event, changeStepSchema)
  return changeStep(db(), build.id, id, change)
})
