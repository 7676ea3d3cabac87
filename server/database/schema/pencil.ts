import { sql } from 'drizzle-orm'
import { boolean, check, doublePrecision, index, integer, pgEnum, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { FACT_KINDS, FACT_UNITS, PICKUP_STATES } from '#shared/types/trade'
import { builds } from './builds'
import { inkingEnum } from './chapters'
import { clips, taskStateEnum } from './clips'
import { id, timestamps } from './columns'
import { steps } from './plan'
import { sessions } from './sessions'
import { users } from './users'

export const factKindEnum = pgEnum('fact_kind', FACT_KINDS)
export const factUnitEnum = pgEnum('fact_unit', FACT_UNITS)
export const pickupStateEnum = pgEnum('pickup_state', PICKUP_STATES)

/** How far the program is with pencilling a session; no row until it has something to listen to. */
export const pencillings = pgTable('pencillings', {
  sessionId: uuid('session_id').primaryKey().references(() => sessions.id, { onDelete: 'cascade' }),
  state: taskStateEnum('state').notNull().default('waiting'),
  message: text('message').notNull().default(''),
  ...timestamps,
})

/**
 * Where a person has deleted a chapter: the program proposes nothing there again. `chapterId` is that of the chapter,
 * so that putting it back takes the word back.
 */
export const dismissals = pgTable('dismissals', {
  chapterId: uuid('chapter_id').primaryKey(),
  clipId: uuid('clip_id').notNull().references(() => clips.id, { onDelete: 'cascade' }),
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  startMs: integer('start_ms').notNull(),
  endMs: integer('end_ms').notNull(),
  createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
  ...timestamps,
}, table => [
  index('dismissals_session_index').on(table.sessionId),
  index('dismissals_clip_index').on(table.clipId),
])

const place = {
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  clipId: uuid('clip_id').notNull().references(() => clips.id, { onDelete: 'cascade' }),
  /** Null: it belongs to no step. */
  stepId: uuid('step_id').references(() => steps.id, { onDelete: 'set null' }),
  /** When it is said, ms of the clip. */
  atMs: integer('at_ms').notNull(),
}
const hands = {
  inking: inkingEnum('inking').notNull().default('pencilled'),
  /** The program's own, touched by nobody: only these may it change and take away. */
  proposed: boolean('proposed').notNull().default(false),
  version: integer('version').notNull().default(1),
  createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
  inkedBy: uuid('inked_by').references(() => users.id, { onDelete: 'set null' }),
  updatedBy: uuid('updated_by').references(() => users.id, { onDelete: 'set null' }),
}

/** Something measured, mixed, counted or named aloud. Lengths are mm, temperatures °C, angles degrees, times minutes. */
export const facts = pgTable('facts', {
  id: id(),
  ...place,
  kind: factKindEnum('kind').notNull(),
  /** The words as said; they stay when the value is mended. */
  said: text('said').notNull(),
  value: doublePrecision('value'),
  unit: factUnitEnum('unit'),
  /** Deleted by a person: kept, unseen, so that the program does not say it again. */
  dismissed: boolean('dismissed').notNull().default(false),
  ...hands,
  ...timestamps,
}, table => [
  index('facts_session_index').on(table.sessionId),
  index('facts_step_index').on(table.stepId),
  index('facts_clip_index').on(table.clipId, table.atMs),
  index('facts_build_index').on(table.buildId),
  check('facts_at', sql`${table.atMs} >= 0`),
])

/** Something that was said to have been done off camera: a shot that may still be filmed. */
export const pickups = pgTable('pickups', {
  id: id(),
  ...place,
  words: text('words').notNull(),
  state: pickupStateEnum('state').notNull().default('open'),
  ...hands,
  ...timestamps,
}, table => [
  index('pickups_session_index').on(table.sessionId),
  index('pickups_build_index').on(table.buildId, table.state),
  index('pickups_clip_index').on(table.clipId, table.atMs),
  index('pickups_step_index').on(table.stepId),
  check('pickups_at', sql`${table.atMs} >= 0`),
])

export type FactRow = typeof facts.$inferSelect
export type PickupRow = typeof pickups.$inferSelect
