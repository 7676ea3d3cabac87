import { eq } from 'drizzle-orm'
import type { ClipChanges } from '#shared/schemas/clips'
import { notFound } from '#shared/utils/errors'
import { alignClips } from '#server/indexing/alignClips'
import { addJob } from '../adapters/queue'
import type { Database, Executor, Transaction } from '../database/client'
import { captionTracks, type Clip, clips, cues, sessions, uploads } from '../database/schema'
import { announce } from './live'
import { clipPrefix, trackPrefix } from './objectKeys'
import { enqueuePencilling } from './pencil/queue'

/** Changes what a person may change of a clip; every change of time lays the session's clips out again. */
export async function updateClip(database: Database, clipId: string, userId: string, changes: ClipChanges): Promise<void> {
  await database.transaction(async (tx) => {
    const clip = await lockClip(tx, clipId)
    if (changes.camera !== undefined) await tx.update(clips).set({ camera: changes.camera }).where(eq(clips.id, clipId))
    if (changes.recordedAt !== undefined) {
      const byHand = changes.recordedAt !== null
      await tx.update(clips).set({ recordedAt: byHand ? new Date(changes.recordedAt!) : null, recordedAtSource: byHand ? 'hand' : null }).where(eq(clips.id, clipId))
    }
    if (changes.offsetMs !== undefined) {
      // A place by hand is a place among the others: those must have theirs first.
      await alignSession(tx, clip.sessionId)
      await tx.update(clips).set(changes.offsetMs === null ? { offsetByHand: false } : { offsetByHand: true, offsetMs: changes.offsetMs }).where(eq(clips.id, clipId))
    }
    if (changes.recordedAt !== undefined || changes.offsetMs !== undefined) {
      await alignSession(tx, clip.sessionId)
      // What was filmed first may have changed, and with it what follows on what.
      await enqueuePencilling(tx, clip.sessionId)
    }
    await announce(tx, { sessionId: clip.sessionId, kind: 'clip', id: clipId, by: userId })
  })
}

/**
 * Makes those who lay a session's clips out take turns. To be taken before the lock of any of its clips: two who each
 * hold a clip and want the other's would stop each other for good. Rows that merely refer to the session may still be added.
 */
export async function lockSession(tx: Transaction, sessionId: string): Promise<void> {
  await tx.select({ id: sessions.id }).from(sessions).where(eq(sessions.id, sessionId)).for('no key update')
}

/** Lays a session's clips on its clock again. */
export async function alignSession(tx: Transaction, sessionId: string): Promise<void> {
  await lockSession(tx, sessionId)
  const rows = await tx.select().from(clips).where(eq(clips.sessionId, sessionId))
  const placed = alignClips(rows.map(clip => ({
    id: clip.id,
    name: clip.name,
    durationMs: clip.durationMs,
    containerAt: clip.probe?.recordedAt ?? null,
    handAt: clip.recordedAtSource === 'hand' ? clip.recordedAt?.toISOString() ?? null : null,
    offsetMs: clip.offsetMs,
    offsetByHand: clip.offsetByHand,
    placedBy: clip.recordedAtSource,
  })))
  for (const { id, ...place } of placed) {
    const before = rows.find(clip => clip.id === id)!
    const same = before.offsetMs === place.offsetMs && before.recordedAtSource === place.recordedAtSource && before.recordedAt?.getTime() === place.recordedAt?.getTime()
    if (!same) await tx.update(clips).set(place).where(eq(clips.id, id))
  }
}

/**
 * Removes a clip with its chapters; what lies in the storage follows by a job. Caption files of a clip that never
 * finished uploading go back to waiting, those of a finished one go with it. (A broken clip has let go of its own already.)
 */
export async function deleteClip(database: Database, clipId: string, userId: string | null): Promise<void> {
  await database.transaction(async (tx) => {
    const clip = await lockClip(tx, clipId)
    if (clip.state === 'uploading') {
      await tx.delete(cues).where(eq(cues.clipId, clipId))
      await tx.update(captionTracks).set({ clipId: null, read: false, doubt: null, kept: false }).where(eq(captionTracks.clipId, clipId))
    }
    await dropClip(tx, clip)
    await alignSession(tx, clip.sessionId)
    await announce(tx, { sessionId: clip.sessionId, kind: 'clip', id: clipId, by: userId })
  })
}

/** Deletes the row and leaves a job for its objects, its unfinished upload and its captions' files. */
export async function dropClip(tx: Transaction, clip: Clip): Promise<void> {
  const [upload] = await tx.select().from(uploads).where(eq(uploads.clipId, clip.id))
  const tracks = await tx.select({ id: captionTracks.id }).from(captionTracks).where(eq(captionTracks.clipId, clip.id))
  for (const track of tracks) await addJob(tx, 'remove-objects', { prefix: trackPrefix(track.id) })
  await addJob(tx, 'remove-objects', { prefix: clipPrefix(clip.id), ...(upload ? { upload: { key: clip.objectKey, uploadId: upload.uploadId } } : {}) })
  await tx.delete(clips).where(eq(clips.id, clip.id))
}

async function lockClip(tx: Transaction, clipId: string): Promise<Clip> {
  const [place] = await tx.select({ sessionId: clips.sessionId }).from(clips).where(eq(clips.id, clipId))
  if (place) await lockSession(tx, place.sessionId)
  const [clip] = await tx.select().from(clips).where(eq(clips.id, clipId)).for('no key update')
  if (!clip) throw notFound('That clip')
  return clip
}

export async function isUploading(executor: Executor, clipId: string): Promise<boolean> {
  const [clip] = await executor.select({ state: clips.state }).from(clips).where(eq(clips.id, clipId))
  return clip?.state === 'uploading'
}
