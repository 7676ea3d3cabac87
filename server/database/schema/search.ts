import { sql } from 'drizzle-orm'
import { customType, index, integer, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import { builds } from './builds'
import { captionTracks } from './captions'
import { chapters } from './chapters'
import { clips } from './clips'
import { id } from './columns'
import { sessions } from './sessions'

const tsvector = customType<{ data: string }>({ dataType: () => 'tsvector' })

/**
 * What search finds: a stretch of half a minute or so of one clip, cut where chapters meet. Made from cues
 * and chapters by server/services/search/passages.ts and never edited, so it may be thrown away and made again.
 * A passage of a chapter goes with its chapter: until it is made again nothing of it can be found, which is
 * the safe side for footage that is no longer inked.
 */
export const passages = pgTable('passages', {
  id: id(),
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  sessionId: uuid('session_id').notNull().references(() => sessions.id, { onDelete: 'cascade' }),
  clipId: uuid('clip_id').notNull().references(() => clips.id, { onDelete: 'cascade' }),
  /** Null for a chapter without captions, which is found by its tags alone. */
  trackId: uuid('track_id').references(() => captionTracks.id, { onDelete: 'cascade' }),
  chapterId: uuid('chapter_id').references(() => chapters.id, { onDelete: 'cascade' }),
  startMs: integer('start_ms').notNull(),
  endMs: integer('end_ms').notNull(),
  /** Start of each line on the clip, ms. */
  starts: integer('starts').array().notNull().default(sql`'{}'::integer[]`),
  /** The cues' words. */
  lines: text('lines').array().notNull().default(sql`'{}'::text[]`),
  /** Stems spoken, and tags as `o:glue`, `s:<step>`, `p:<part>`, `t:<stem of a tag's words>`, `b:<build>`, `i:1` when inked. */
  lexemes: tsvector('lexemes').notNull(),
}, table => [
  // The waiting list is kept short: every search reads all of it.
  index('passages_lexemes_index').using('gin', table.lexemes).with({ fastupdate: true, gin_pending_list_limit: 256 }),
  index('passages_clip_index').on(table.clipId),
  index('passages_chapter_index').on(table.chapterId),
  index('passages_track_index').on(table.trackId),
  index('passages_session_index').on(table.sessionId),
  index('passages_build_index').on(table.buildId),
])

/**
 * In how many passages of a build each stem is spoken; the empty stem counts all passages. Kept by triggers on
 * `passages` (in the migration), so that it is right however rows go. Rarer words count more, and spelling is
 * forgiven towards these words.
 */
export const searchWords = pgTable('search_words', {
  buildId: uuid('build_id').notNull().references(() => builds.id, { onDelete: 'cascade' }),
  stem: text('stem').notNull(),
  /** The stem as somebody said it, for suggestions. */
  word: text('word').notNull(),
  passages: integer('passages').notNull().default(0),
}, table => [
  primaryKey({ columns: [table.buildId, table.stem] }),
  index('search_words_stem_index').on(table.stem),
  index('search_words_trigram_index').using('gin', sql`${table.stem} gin_trgm_ops`),
])

export type Passage = typeof passages.$inferSelect
