import type { H3Event } from 'h3'
import type { PasswordHasher } from '#server/services/accounts'
import type { User } from '#server/database/schema'

export const passwords: PasswordHasher = { hash: hashPassword, verify: verifyPassword }

/** A new cookie at every sign-in: one planted beforehand is worth nothing. */
export async function startSession(event: H3Event, user: User): Promise<void> {
  await replaceUserSession(event, { user: { id: user.id, name: user.name, epoch: user.sessionEpoch } }, { cookie: { secure: settings().PUBLIC_URL.startsWith('https:'), sameSite: 'lax', httpOnly: true } })
}
