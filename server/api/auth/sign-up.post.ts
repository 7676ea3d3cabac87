import { signUp } from '#server/services/accounts'
import { signUpSchema } from '#shared/schemas/auth'

export default apiHandler(async (event) => {
  const input = await readBodyAs(event, signUpSchema)
  await limits().spend('sign-up-address', addressOf(event))
  const user = await signUp(db(), passwords, input)
  await startSession(event, user)
  setResponseStatus(event, 201)
  return { name: user.name }
})
