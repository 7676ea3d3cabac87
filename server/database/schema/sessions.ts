import { sql } from 'drizzle-orm'
import { check, date, index, integer, numeric, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import { builds } from './builds'
import { id, timestamps } from './columns'
import { steps } from './plan'

/** A day (or evening) in the shop: what was filmed, and the conditions that glue cares about. */
export const sessions = pgTable('sessions', {
  id: id(),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  /** Local calendar date, ISO. */
  date: date('date', { mode: 'string' }).notNull(),
  title: text('title').notNull().default(''),
  place: text('place').notNull().default(''),
  temperatureC: numeric('temperature_c', { precision: 5, scale: 2, mode: 'number' }),
  humidityPercent: integer('humidity_percent'),
  notes: text('notes').notNull().default(''),
  ...timestamps,
}, table => [
  index('sessions_build_date_index').on(table.buildId, table.date),
  check('sessions_humidity_range', sql`${table.humidityPercent} between 0 and 100`),
  check('sessions_temperature_range', sql`${table.temperatureC} between -60 and 70`),
])

/** Steps ticked as worked on that day. */
export const sessionSteps = pgTable('session_steps', {
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  stepId: uuid('step_id').notNull().references(() => steps.id, { onDelete: 'cascade' }),
}, table => [
  primaryKey({ columns: [table.sessionId, table.stepId] }),
  index('session_steps_step_index').on(table.stepId),
])

export type Session = typeof sessions.$inferSelect
