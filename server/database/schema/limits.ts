import { bigint, integer, pgTable, text } from 'drizzle-orm/pg-core'

/** Counters of rate-limiter-flexible; its column names. */
export const rateLimits = pgTable('rate_limits', {
  key: text('key').primaryKey(),
  points: integer('points').notNull().default(0),
  expire: bigint('expire', { mode: 'number' }),
})
