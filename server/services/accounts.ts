import { sql } from 'drizzle-orm'
import type { SignIn, SignUp } from '#shared/schemas/auth'
import { DomainError } from '#shared/utils/errors'
import type { Executor } from '../database/client'
import { type User, users } from '../database/schema'

/** Password hashing, given by the caller: nuxt-auth-utils's scrypt lives in the site, not in services. */
export interface PasswordHasher {
  hash: (password: string) => Promise<string>
  verify: (hash: string, password: string) => Promise<boolean>
}

/** The same words whether the address is unknown or the password wrong: who has an account is nobody's business. */
const REFUSED = 'That e-mail address and password do not go together. Check both and try again.'
const TAKEN = 'No account could be made with these details. If you already have one, sign in instead.'

/** A hash of nothing anybody knows, checked when the address is unknown so that both answers take as long. */
let decoy: Promise<string> | undefined

export async function signUp(executor: Executor, hasher: PasswordHasher, input: SignUp): Promise<User> {
  const passwordHash = await hasher.hash(input.password)
  const [user] = await executor.insert(users).values({ name: input.name, email: input.email, passwordHash }).onConflictDoNothing().returning()
  if (!user) throw new DomainError('bad-input', TAKEN)
  return user
}

/** @throws DomainError `bad-input` with one message for every reason. */
export async function signIn(executor: Executor, hasher: PasswordHasher, input: SignIn): Promise<User> {
  const [user] = await executor.select().from(users).where(sql`lower(${users.email}) = ${input.email}`)
  decoy ??= hasher.hash(crypto.randomUUID())
  const matches = await hasher.verify(user?.passwordHash ?? await decoy, input.password)
  if (!user || !matches) throw new DomainError('bad-input', REFUSED)
  return user
}
