import { eq } from 'drizzle-orm'
import type { H3Event } from 'h3'
import { users } from '#server/database/schema'
import { DomainError } from '#shared/utils/errors'

/** What the site knows of who is asking. Never taken from the cookie alone. */
export interface Account { id: string, name: string, email: string }

/**
 * The signed-in account, read afresh from the database, or null for a guest. A cookie whose account is gone
 * or whose epoch is older than the account's (password changed, signed out everywhere) counts as a guest.
 */
export async function whoAsks(event: H3Event): Promise<Account | null> {
  if (event.context.account !== undefined) return event.context.account as Account | null
  const { user } = await getUserSession(event)
  let account: Account | null = null
  if (user) {
    const [row] = await db().select({ id: users.id, name: users.name, email: users.email, sessionEpoch: users.sessionEpoch }).from(users).where(eq(users.id, user.id))
    if (row && row.sessionEpoch === user.epoch) account = { id: row.id, name: row.name, email: row.email }
    else await clearUserSession(event)
  }
  event.context.account = account
  return account
}

export async function requireAccount(event: H3Event): Promise<Account> {
  const account = await whoAsks(event)
  if (!account) throw new DomainError('signed-out', 'Sign in to go on. What you typed is still on the page.')
  return account
}
