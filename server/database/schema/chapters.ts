import { sql } from 'drizzle-orm'
import { boolean, check, index, integer, jsonb, pgEnum, pgTable, primaryKey, real, text, uuid } from 'drizzle-orm/pg-core'
import { INKINGS, type Operation, OPERATIONS } from '#shared/types/trade'
import { builds } from './builds'
import { clips } from './clips'
import { id, timestamps } from './columns'
import { parts, steps } from './plan'
import { sessions } from './sessions'
import { users } from './users'

export const operationEnum = pgEnum('operation', OPERATIONS)
export const inkingEnum = pgEnum('inking', INKINGS)

/** The words and times that decided a pencilled chapter. */
export interface EvidenceWords { atMs: number, words: string }

/** What else a chapter may show, likeliest first; a step of null says that it shows none. */
export interface Alternatives {
  steps: { stepId: string | null, confidence: number }[]
  operations: { operation: Operation, confidence: number }[]
}

/**
 * A stretch of one clip, half open [startMs, endMs). Belongs to the clip, not to the session's clock,
 * so that re-aligning a camera never moves a chapter off its footage. Chapters of a clip never overlap:
 * an exclusion constraint (in the migration, Drizzle cannot say it) sees to it.
 */
export const chapters = pgTable('chapters', {
  id: id(),
  clipId: uuid('clip_id').notNull().references(() => clips.id, { onDelete: 'cascade' }),
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  startMs: integer('start_ms').notNull(),
  endMs: integer('end_ms').notNull(),
  stepId: uuid('step_id').references(() => steps.id, { onDelete: 'restrict' }),
  operation: operationEnum('operation').notNull(),
  inking: inkingEnum('inking').notNull(),
  /** 0 to 1 for pencilled chapters, null for inked ones. */
  confidence: real('confidence'),
  evidence: jsonb('evidence').$type<EvidenceWords[]>().notNull().default(sql`'[]'::jsonb`),
  alternatives: jsonb('alternatives').$type<Alternatives>().notNull().default(sql`'{"steps":[],"operations":[]}'::jsonb`),
  /** The program's own, touched by nobody: only these may it move, change and take away. */
  proposed: boolean('proposed').notNull().default(false),
  note: text('note').notNull().default(''),
  /** Raised by every change; a change that names an older number is refused. */
  version: integer('version').notNull().default(1),
  createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
  /** Whose ink it is: crew may change no other person's. Null while pencilled. */
  inkedBy: uuid('inked_by').references(() => users.id, { onDelete: 'set null' }),
  updatedBy: uuid('updated_by').references(() => users.id, { onDelete: 'set null' }),
  ...timestamps,
}, table => [
  index('chapters_session_index').on(table.sessionId),
  index('chapters_build_step_index').on(table.buildId, table.stepId),
  index('chapters_clip_start_index').on(table.clipId, table.startMs),
  check('chapters_times', sql`${table.startMs} >= 0 and ${table.endMs} > ${table.startMs}`),
  check('chapters_none_has_no_step', sql`${table.operation} <> 'none' or ${table.stepId} is null`),
  check('chapters_proposed_is_pencilled', sql`not ${table.proposed} or ${table.inking} = 'pencilled'`),
  check('chapters_confidence_range', sql`${table.confidence} between 0 and 1`),
])

export const chapterParts = pgTable('chapter_parts', {
  chapterId: uuid('chapter_id').notNull().references(() => chapters.id, { onDelete: 'cascade' }),
  partId: uuid('part_id').notNull().references(() => parts.id, { onDelete: 'cascade' }),
}, table => [
  primaryKey({ columns: [table.chapterId, table.partId] }),
  index('chapter_parts_part_index').on(table.partId),
])

export type Chapter = typeof chapters.$inferSelect
