import { timestamp, uuid } from 'drizzle-orm/pg-core'

/** Every table's key: made by the database, unguessable, meaningless. */
export const id = () => uuid('id').primaryKey().defaultRandom()

/** When a row came and when it last changed, kept by the services that write it. */
export const timestamps = {
  createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow().$onUpdate(() => new Date()),
}
