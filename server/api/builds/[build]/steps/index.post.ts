import { requireBuild } from '#server/services/access'
import { addStep } from '#server/services/plan'
import { newStepSchema } from '#shared/schemas/plan'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const input = await readBodyAs(event, newStepSchema)
  const step = await addStep(db(), id, input)
  setResponseStatus(event, 201)
  return step
})
