import { createBuild } from '#server/services/builds'
import { newBuildSchema } from '#shared/schemas/builds'

export default apiHandler(async (event) => {
  const account = await requireAccount(event)
  const input = await readBodyAs(event, newBuildSchema)
  const build = await createBuild(db(), account.id, input)
  setResponseStatus(event, 201)
  return build
})
