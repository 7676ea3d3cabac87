import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import type { TrackChanges } from '#shared/schemas/captions'
import { isBroken } from '#shared/utils/clipFailures'
import { DomainError, notFound } from '#shared/utils/errors'
import { pairCaptions } from '#server/indexing/captions/pairing'
import { addJob } from '../adapters/queue'
import type { Storage } from '../adapters/storage'
import type { Database, Executor, Transaction } from '../database/client'
import { type CaptionTrack, captionTracks, clips, cues, sessions } from '../database/schema'
import { setTask } from './clipTasks'
import { announce } from './live'
import { trackKey, trackPrefix } from './objectKeys'
import { enqueuePencilling } from './pencil/queue'
import { refreshPassages } from './search/passages'

/**
 * Keeps a caption file as uploaded, pairs it with the session's clip of the same name (or lets it wait for one)
 * and leaves a job to read it. The bytes are stored first: a row never points at nothing.
 */
export async function addCaptionFile(database: Database, storage: Storage, sessionId: string, userId: string, file: { name: string, bytes: Buffer }): Promise<{ trackId: string, clipId: string | null }> {
  if (!file.bytes.length) throw new DomainError('unreadable', `${file.name} is empty, so it was not kept. Export the captions again.`)
  const id = crypto.randomUUID()
  await storage.write(trackKey(id), file.bytes, 'application/octet-stream')
  return database.transaction(async (tx) => {
    const [session] = await tx.select({ id: sessions.id, buildId: sessions.buildId }).from(sessions).where(eq(sessions.id, sessionId))
    if (!session) throw notFound('That session')
    const { clipId, language } = await clipFor(tx, sessionId, file.name)
    const [track] = await tx.insert(captionTracks).values({
      id, sessionId, buildId: session.buildId, clipId, name: file.name, language: language ?? 'und', objectKey: trackKey(id), sizeBytes: file.bytes.length, uploadedBy: userId,
    }).returning()
    await enqueueReading(tx, track!)
    await announce(tx, { sessionId, kind: 'captions', id, by: userId })
    return { trackId: id, clipId }
  })
}

/** Pairs a caption file with another clip of its session by hand, says its language, or that it belongs where it is. */
export async function updateTrack(database: Database, trackId: string, userId: string, changes: TrackChanges): Promise<void> {
  await database.transaction(async (tx) => {
    const track = await lockTrack(tx, trackId)
    if (changes.language !== undefined) await tx.update(captionTracks).set({ language: changes.language }).where(eq(captionTracks.id, trackId))
    if (changes.kept !== undefined) await tx.update(captionTracks).set({ kept: changes.kept }).where(eq(captionTracks.id, trackId))
    if (changes.clipId !== undefined && changes.clipId !== track.clipId) await pairWith(tx, track, changes.clipId)
    await announce(tx, { sessionId: track.sessionId, kind: 'captions', id: trackId, by: userId })
  })
}

async function pairWith(tx: Transaction, track: CaptionTrack, clipId: string | null): Promise<void> {
  if (track.embeddedStream !== null) throw new DomainError('bad-input', 'These captions are part of the clip itself, so they cannot go to another one. Nothing was changed.')
  if (clipId === null) {
    const [corrected] = await tx.select({ count: sql<number>`count(*)::int` }).from(cues).where(and(eq(cues.trackId, track.id), isNotNull(cues.originalText)))
    if (corrected!.count) throw new DomainError('conflict', `${corrected!.count} of these captions were corrected by hand and would be lost. Pair the file with another clip instead, or delete it. Nothing was changed.`)
    await tx.delete(cues).where(eq(cues.trackId, track.id))
  }
  else {
    const [clip] = await tx.select({ name: clips.name, failure: clips.failure }).from(clips).where(and(eq(clips.id, clipId), eq(clips.sessionId, track.sessionId)))
    if (!clip) throw new DomainError('bad-input', 'That clip is not in this session. Nothing was changed.')
    if (isBroken(clip)) throw new DomainError('bad-input', `${clip.name} could not be read, so no captions can belong to it. Choose another clip. Nothing was changed.`)
    // The captions move with their corrections; the job then holds them against their new clip.
    await tx.update(cues).set({ clipId }).where(eq(cues.trackId, track.id))
  }
  const [paired] = await tx.update(captionTracks).set({ clipId, read: false, doubt: null, kept: false }).where(eq(captionTracks.id, track.id)).returning()
  for (const changed of [track.clipId, clipId]) if (changed) await refreshPassages(tx, changed)
  await enqueuePencilling(tx, track.sessionId)
  await enqueueReading(tx, paired!)
}

/** Removes a caption file with what was read from it. */
export async function deleteTrack(database: Database, trackId: string, userId: string): Promise<void> {
  await database.transaction(async (tx) => {
    const track = await lockTrack(tx, trackId)
    await tx.delete(captionTracks).where(eq(captionTracks.id, trackId))
    if (track.clipId) {
      await refreshPassages(tx, track.clipId)
      await enqueuePencilling(tx, track.sessionId)
    }
    await addJob(tx, 'remove-objects', { prefix: trackPrefix(trackId) })
    await announce(tx, { sessionId: track.sessionId, kind: 'captions', id: trackId, by: userId })
  })
}

/** Pairs caption files that wait for a clip of their name; called when a clip joins the session. */
export async function pairWaitingTracks(tx: Transaction, sessionId: string): Promise<void> {
  const waiting = await tx.select().from(captionTracks).where(and(eq(captionTracks.sessionId, sessionId), isNull(captionTracks.clipId))).for('update')
  for (const track of waiting) {
    const { clipId, language } = await clipFor(tx, sessionId, track.name)
    if (!clipId) continue
    const [paired] = await tx.update(captionTracks).set({ clipId, read: false, ...(track.language === 'und' && language ? { language } : {}) }).where(eq(captionTracks.id, track.id)).returning()
    await enqueueReading(tx, paired!)
    await announce(tx, { sessionId, kind: 'captions', id: track.id })
  }
}

async function clipFor(tx: Transaction, sessionId: string, captionName: string): Promise<{ clipId: string | null, language: string | null }> {
  const all = await tx.select({ id: clips.id, name: clips.name, failure: clips.failure }).from(clips).where(eq(clips.sessionId, sessionId))
  // Nothing is ever said over a file that cannot be read: its captions wait for the one that is sent instead.
  const rows = all.filter(clip => !isBroken(clip))
  const [pairing] = pairCaptions(rows.map(clip => clip.name), [captionName])
  const named = rows.filter(clip => clip.name === pairing!.clipName)
  // Two clips of one name (a camera that counts from 1 every day): a person must say which.
  return { clipId: named.length === 1 ? named[0]!.id : null, language: pairing!.language }
}

async function enqueueReading(tx: Transaction, track: CaptionTrack): Promise<void> {
  if (track.clipId) await setTask(tx, { id: track.clipId, sessionId: track.sessionId }, 'read-captions', { state: 'waiting' })
  await addJob(tx, 'read-captions', { trackId: track.id })
}

async function lockTrack(tx: Transaction, trackId: string): Promise<CaptionTrack> {
  const [track] = await tx.select().from(captionTracks).where(eq(captionTracks.id, trackId)).for('update')
  if (!track) throw notFound('That caption file')
  return track
}

/** Where the file as uploaded can be fetched, under its own name. */
export async function originalAddress(executor: Executor, storage: Storage, trackId: string): Promise<string> {
  const [track] = await executor.select().from(captionTracks).where(eq(captionTracks.id, trackId))
  if (!track) throw notFound('That caption file')
  // As plain bytes: whatever is in the file, the browser must not run it.
  return storage.presignGet(track.objectKey, { contentType: 'application/octet-stream', downloadName: track.name, cacheSeconds: 0 })
}
