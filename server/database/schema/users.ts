import { sql } from 'drizzle-orm'
import { integer, pgTable, text, uniqueIndex } from 'drizzle-orm/pg-core'
import { id, timestamps } from './columns'

export const users = pgTable('users', {
  id: id(),
  email: text('email').notNull(),
  name: text('name').notNull(),
  /** scrypt, made by nuxt-auth-utils. */
  passwordHash: text('password_hash').notNull(),
  /** Raised to end every session of the account: a cookie with an older number is refused. */
  sessionEpoch: integer('session_epoch').notNull().default(1),
  ...timestamps,
}, table => [
  uniqueIndex('users_email_unique').on(sql`lower(${table.email})`),
])

export type User = typeof users.$inferSelect
