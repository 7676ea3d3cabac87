import { signIn } from '#server/services/accounts'
import { signInSchema } from '#shared/schemas/auth'

export default apiHandler(async (event) => {
  const input = await readBodyAs(event, signInSchema)
  await limits().spend('sign-in-address', addressOf(event))
  await limits().spend('sign-in-account', input.email)
  const user = await signIn(db(), passwords, input)
  await limits().forgive('sign-in-account', input.email)
  await startSession(event, user)
  return { name: user.name }
})
