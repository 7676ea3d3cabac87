import { requireBuild } from '#server/services/access'
import { createSession } from '#server/services/sessions'
import { newSessionSchema } from '#shared/schemas/sessions'

export default apiHandler(async (event) => {
  const build = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', build, 'work')
  const input = await readBodyAs(event, newSessionSchema)
  const session = await createSession(db(), build, input)
  setResponseStatus(event, 201)
  return session
})
