import { sql } from 'drizzle-orm'
import { boolean, check, index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { builds } from './builds'
import { clips } from './clips'
import { id, timestamps } from './columns'
import { sessions } from './sessions'
import { users } from './users'

/** A caption file, or a text track found inside a clip. Waits without a clip until it is paired. */
export const captionTracks = pgTable('caption_tracks', {
  id: id(),
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  clipId: uuid('clip_id').references(() => clips.id, { onDelete: 'cascade' }),
  name: text('name').notNull(),
  /** BCP 47 tag; `und` when nobody said. */
  language: text('language').notNull().default('und'),
  /** Stream index inside the clip; null for an uploaded file. */
  embeddedStream: integer('embedded_stream'),
  /** The bytes as uploaded, kept for good. */
  objectKey: text('object_key').notNull(),
  sizeBytes: integer('size_bytes').notNull(),
  /** What was odd about the file, in words. */
  warnings: jsonb('warnings').$type<string[]>().notNull().default(sql`'[]'::jsonb`),
  /** Why the file may belong to another clip, in words; null when nothing speaks against this one. */
  doubt: text('doubt'),
  /** A person said that it belongs here, whatever the doubt. */
  kept: boolean('kept').notNull().default(false),
  /** Why nothing could be read, in words; null when it was read or waits. */
  failure: text('failure'),
  read: boolean('read').notNull().default(false),
  uploadedBy: uuid('uploaded_by').references(() => users.id, { onDelete: 'set null' }),
  ...timestamps,
}, table => [
  index('caption_tracks_session_index').on(table.sessionId),
  index('caption_tracks_clip_index').on(table.clipId),
])

export const cues = pgTable('cues', {
  id: id(),
  trackId: uuid('track_id').notNull().references(() => captionTracks.id, { onDelete: 'cascade' }),
  clipId: uuid('clip_id').notNull().references(() => clips.id, { onDelete: 'cascade' }),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  /** The cue's own id in the file, '' when it has none. */
  label: text('label').notNull().default(''),
  startMs: integer('start_ms').notNull(),
  endMs: integer('end_ms').notNull(),
  text: text('text').notNull(),
  /** The words as they came, when a person has corrected them. */
  originalText: text('original_text'),
  version: integer('version').notNull().default(1),
  ...timestamps,
}, table => [
  index('cues_track_start_index').on(table.trackId, table.startMs),
  index('cues_clip_start_index').on(table.clipId, table.startMs),
  index('cues_build_index').on(table.buildId),
  check('cues_times', sql`${table.startMs} >= 0 and ${table.endMs} >= ${table.startMs}`),
])

export type CaptionTrack = typeof captionTracks.$inferSelect
export type CueRow = typeof cues.$inferSelect
