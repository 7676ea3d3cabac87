import { requireBuild } from '#server/services/access'
import { addPart } from '#server/services/parts'
import { newPartSchema } from '#shared/schemas/plan'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const input = await readBodyAs(event, newPartSchema)
  const part = await addPart(db(), id, input)
  setResponseStatus(event, 201)
  return part
})
