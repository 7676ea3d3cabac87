import { sql } from 'drizzle-orm'
import { bigint, boolean, check, index, integer, jsonb, pgEnum, pgTable, primaryKey, real, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import type { ClipFailure, FootageIndex, ProbeResult } from '#shared/types/media'
import { CLIP_STATES, CLIP_TASKS, RECORDED_AT_SOURCES, TASK_STATES } from '#shared/types/trade'
import { builds } from './builds'
import { id, timestamps } from './columns'
import { sessions } from './sessions'
import { users } from './users'

export const clipStateEnum = pgEnum('clip_state', CLIP_STATES)
export const recordedAtSourceEnum = pgEnum('recorded_at_source', RECORDED_AT_SOURCES)
export const clipTaskEnum = pgEnum('clip_task', CLIP_TASKS)
export const taskStateEnum = pgEnum('task_state', TASK_STATES)

export const clips = pgTable('clips', {
  id: id(),
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  /** Kept here too, so that who may see a clip is one join away. Always the session's build. */
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  /** The file's name as the phone wrote it. Shown, never used as a path. */
  name: text('name').notNull(),
  objectKey: text('object_key').notNull(),
  sizeBytes: bigint('size_bytes', { mode: 'number' }).notNull(),
  contentType: text('content_type').notNull().default('application/octet-stream'),
  /** SHA-256 over the parts' SHA-256s (part size is a function of file size), hex. Null until uploaded. */
  contentHash: text('content_hash'),
  /** SHA-256 over the size and samples of the file, hex: recognises the same file after a reload, and likely doubles. */
  fingerprint: text('fingerprint'),
  state: clipStateEnum('state').notNull().default('uploading'),
  failure: jsonb('failure').$type<ClipFailure>(),
  probe: jsonb('probe').$type<ProbeResult>(),
  footage: jsonb('footage').$type<FootageIndex>(),
  /** Integer ms; null until probed. */
  durationMs: integer('duration_ms'),
  recordedAt: timestamp('recorded_at', { withTimezone: true }),
  recordedAtSource: recordedAtSourceEnum('recorded_at_source'),
  camera: text('camera').notNull().default(''),
  /** Place of the clip's first frame on the session's clock, integer ms. */
  offsetMs: integer('offset_ms').notNull().default(0),
  /** True once a person nudged the clip: alignment by the program leaves it alone. */
  offsetByHand: boolean('offset_by_hand').notNull().default(false),
  proxyKey: text('proxy_key'),
  uploadedBy: uuid('uploaded_by').references(() => users.id, { onDelete: 'set null' }),
  ...timestamps,
}, table => [
  index('clips_session_index').on(table.sessionId, table.offsetMs),
  index('clips_build_index').on(table.buildId),
  uniqueIndex('clips_build_content_unique').on(table.buildId, table.contentHash).where(sql`${table.contentHash} is not null`),
  index('clips_fingerprint_index').on(table.buildId, table.fingerprint),
  // Two pages that begin the same file at once get the same upload.
  uniqueIndex('clips_uploading_unique').on(table.buildId, table.fingerprint).where(sql`${table.state} = 'uploading'`),
  check('clips_duration_positive', sql`coalesce(${table.durationMs}, 0) >= 0`),
])

/** A multipart upload that has not finished; gone when the clip is whole. */
export const uploads = pgTable('uploads', {
  clipId: uuid('clip_id').primaryKey().references(() => clips.id, { onDelete: 'cascade' }),
  /** The storage's name for the multipart upload. */
  uploadId: text('upload_id').notNull(),
  partSizeBytes: integer('part_size_bytes').notNull(),
  ...timestamps,
})

/** Progress of one task on one clip, read by the page. */
export const clipTasks = pgTable('clip_tasks', {
  clipId: uuid('clip_id').notNull().references(() => clips.id, { onDelete: 'cascade' }),
  task: clipTaskEnum('task').notNull(),
  state: taskStateEnum('state').notNull().default('waiting'),
  /** 0 to 1. */
  progress: real('progress').notNull().default(0),
  attempts: integer('attempts').notNull().default(0),
  message: text('message').notNull().default(''),
  ...timestamps,
}, table => [
  primaryKey({ columns: [table.clipId, table.task] }),
])

export type Clip = typeof clips.$inferSelect
export type Upload = typeof uploads.$inferSelect
export type ClipTaskRow = typeof clipTasks.$inferSelect
