import { asc, eq, sql } from 'drizzle-orm'
import type { CueChanges } from '#shared/schemas/captions'
import type { Cue } from '#shared/types/captions'
import type { CueView } from '#shared/types/session'
import { DomainError, notFound } from '#shared/utils/errors'
import { writeSrt, writeVtt } from '#server/indexing/captions/writeCaptions'
import type { Database, Executor } from '../database/client'
import { type CaptionTrack, captionTracks, type CueRow, cues } from '../database/schema'
import { announce } from './live'
import { enqueuePencilling } from './pencil/queue'
import { refreshPassages } from './search/passages'

/** All captions of a session that are paired with a clip, clip by clip in time order. */
export async function listCues(executor: Executor, sessionId: string): Promise<CueView[]> {
  const rows = await executor.select({
    id: cues.id, trackId: cues.trackId, clipId: cues.clipId, startMs: cues.startMs, endMs: cues.endMs, text: cues.text,
    edited: sql<boolean>`${cues.originalText} is not null`, original: cues.originalText, version: cues.version,
  }).from(cues).innerJoin(captionTracks, eq(captionTracks.id, cues.trackId)).where(eq(captionTracks.sessionId, sessionId)).orderBy(asc(cues.clipId), asc(cues.startMs), asc(cues.endMs))
  return rows
}

/**
 * Corrects the words of one caption; the words as they came are kept beside them.
 * @throws DomainError 'conflict' with the caption as it stands when somebody else changed it
 */
export async function updateCue(database: Database, cueId: string, userId: string, changes: CueChanges): Promise<CueView> {
  return database.transaction(async (tx) => {
    const [row] = await tx.select({ cue: cues, sessionId: captionTracks.sessionId }).from(cues).innerJoin(captionTracks, eq(captionTracks.id, cues.trackId)).where(eq(cues.id, cueId)).for('update', { of: cues })
    if (!row) throw notFound('That caption')
    const { cue, sessionId } = row
    if (cue.version !== changes.version) {
      throw new DomainError('conflict', `Somebody else changed this caption to “${cue.text}” meanwhile. Yours was not saved: keep theirs, or save yours over it.`, { current: toView(cue) })
    }
    const original = cue.originalText ?? cue.text
    // Typing the words as they came takes the correction back.
    const originalText = changes.text === original ? null : original
    const [changed] = await tx.update(cues).set({ text: changes.text, originalText, version: cue.version + 1 }).where(eq(cues.id, cueId)).returning()
    await refreshPassages(tx, cue.clipId)
    await enqueuePencilling(tx, sessionId)
    await announce(tx, { sessionId, kind: 'captions', id: cue.trackId, by: userId })
    return toView(changed!)
  })
}

/** A caption file's captions as they stand now, with corrections, ready for writing out. */
export async function trackCues(executor: Executor, trackId: string): Promise<{ track: CaptionTrack, cues: Cue[] }> {
  const [track] = await executor.select().from(captionTracks).where(eq(captionTracks.id, trackId))
  if (!track) throw notFound('That caption file')
  const rows = await executor.select().from(cues).where(eq(cues.trackId, trackId)).orderBy(asc(cues.startMs), asc(cues.endMs))
  return { track, cues: rows.map(row => ({ id: row.label, startMs: row.startMs, endMs: row.endMs, text: row.text })) }
}

function toView(cue: CueRow): CueView {
  return { id: cue.id, trackId: cue.trackId, clipId: cue.clipId, startMs: cue.startMs, endMs: cue.endMs, text: cue.text, edited: cue.originalText !== null, original: cue.originalText, version: cue.version }
}

/** A caption file's captions written out, named after the file that was uploaded. */
export async function exportTrack(executor: Executor, trackId: string, format: 'vtt' | 'srt'): Promise<{ name: string, type: string, text: string }> {
  const { track, cues } = await trackCues(executor, trackId)
  const name = `${track.name.replace(/\.(?:vtt|srt|webvtt|txt)$/i, '')}.${format}`
  return format === 'vtt'
    ? { name, type: 'text/vtt; charset=utf-8', text: writeVtt(cues) }
    : { name, type: 'application/x-subrip; charset=utf-8', text: writeSrt(cues) }
}
