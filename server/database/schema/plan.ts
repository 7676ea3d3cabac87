import { sql } from 'drizzle-orm'
import { check, index, integer, numeric, pgEnum, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { STEP_STATUSES } from '#shared/types/trade'
import { builds } from './builds'
import { id, timestamps } from './columns'

export const stepStatusEnum = pgEnum('step_status', STEP_STATUSES)

export const steps = pgTable('steps', {
  id: id(),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  /** The plan book's own number, shown in the balloon. Stays when the order changes. */
  number: integer('number').notNull(),
  /** Place in the running order of the plan, from 0. */
  position: integer('position').notNull(),
  stage: text('stage').notNull().default(''),
  title: text('title').notNull(),
  description: text('description').notNull().default(''),
  materials: text('materials').array().notNull().default(sql`'{}'::text[]`),
  status: stepStatusEnum('status').notNull().default('to-do'),
  plannedMinutes: integer('planned_minutes'),
  spentMinutes: integer('spent_minutes'),
  archivedAt: timestamp('archived_at', { withTimezone: true }),
  ...timestamps,
}, table => [
  uniqueIndex('steps_build_number_unique').on(table.buildId, table.number),
  index('steps_build_position_index').on(table.buildId, table.position),
  check('steps_number_positive', sql`${table.number} > 0`),
  check('steps_minutes_positive', sql`coalesce(${table.plannedMinutes}, 0) >= 0 and coalesce(${table.spentMinutes}, 0) >= 0`),
])

export const parts = pgTable('parts', {
  id: id(),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  position: integer('position').notNull(),
  name: text('name').notNull(),
  /** Other words for it, as the builder says them: "back end", "stern board". */
  aliases: text('aliases').array().notNull().default(sql`'{}'::text[]`),
  material: text('material').notNull().default(''),
  thicknessMm: numeric('thickness_mm', { precision: 9, scale: 3, mode: 'number' }),
  quantity: integer('quantity'),
  archivedAt: timestamp('archived_at', { withTimezone: true }),
  ...timestamps,
}, table => [
  uniqueIndex('parts_build_name_unique').on(table.buildId, sql`lower(${table.name})`),
  check('parts_amounts_positive', sql`coalesce(${table.thicknessMm}, 1) > 0 and coalesce(${table.quantity}, 1) > 0`),
])

export const stepParts = pgTable('step_parts', {
  stepId: uuid('step_id').notNull().references(() => steps.id, { onDelete: 'cascade' }),
  partId: uuid('part_id').notNull().references(() => parts.id, { onDelete: 'cascade' }),
}, table => [
  primaryKey({ columns: [table.stepId, table.partId] }),
  index('step_parts_part_index').on(table.partId),
])

export type Step = typeof steps.$inferSelect
export type Part = typeof parts.$inferSelect
