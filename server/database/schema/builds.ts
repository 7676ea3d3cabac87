import { index, pgEnum, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { ROLES, UNITS, VISIBILITIES } from '#shared/types/trade'
import { id, timestamps } from './columns'
import { users } from './users'

export const unitsEnum = pgEnum('units', UNITS)
export const visibilityEnum = pgEnum('visibility', VISIBILITIES)
export const roleEnum = pgEnum('role', ROLES)

export const builds = pgTable('builds', {
  id: id(),
  /** Public address of the build; unguessable, so that an unlisted build is found only by its link. */
  address: text('address').notNull(),
  name: text('name').notNull(),
  /** What is being built, in the builder's words: "12-foot plywood pram". */
  boat: text('boat').notNull().default(''),
  about: text('about').notNull().default(''),
  units: unitsEnum('units').notNull().default('inch'),
  visibility: visibilityEnum('visibility').notNull().default('private'),
  ...timestamps,
}, table => [
  uniqueIndex('builds_address_unique').on(table.address),
  index('builds_visibility_index').on(table.visibility),
])

export const memberships = pgTable('memberships', {
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  role: roleEnum('role').notNull(),
  ...timestamps,
}, table => [
  primaryKey({ columns: [table.buildId, table.userId] }),
  index('memberships_user_index').on(table.userId),
])

export type Build = typeof builds.$inferSelect
export type Membership = typeof memberships.$inferSelect
