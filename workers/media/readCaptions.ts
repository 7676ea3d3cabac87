import { eq } from 'drizzle-orm'
import { z } from 'zod'
import type { Transaction } from '#server/database/client'
import { type CaptionTrack, captionTracks, clips, cues } from '#server/database/schema'
import { checkAgainstClip, cuesForStorage } from '#server/indexing/captions/order'
import { readCaptions as read } from '#server/indexing/captions/readCaptions'
import { setTask } from '#server/services/clipTasks'
import { announce } from '#server/services/live'
import { enqueuePencilling } from '#server/services/pencil/queue'
import { refreshPassages } from '#server/services/search/passages'
import type { CaptionReading, Cue } from '#shared/types/captions'
import { DomainError } from '#shared/utils/errors'
import type { JobRun, WorkerContext } from './context'
import { giveUp, whyAgain } from './failures'

const payloadSchema = z.object({ trackId: z.uuid() })
const BATCH = 500
/** More words than anybody reads off a picture; a file of one endless line must not fill the page. */
const LONGEST_CUE = 5000

/**
 * Reads a caption file into cues and says what is odd about it, also against the length of its clip.
 * Cues that were read before stay as they are, with their corrections: only the warnings are worked out again.
 * A file that waits for its clip is read too, so that a broken one shows at once.
 */
export async function readCaptions({ database, storage }: WorkerContext, payload: unknown, run: JobRun): Promise<void> {
  const { trackId } = payloadSchema.parse(payload)
  const [track] = await database.select().from(captionTracks).where(eq(captionTracks.id, trackId))
  if (!track) return
  try {
    const result = readAll(await storage.readBuffer(track.objectKey), track.name)
    await database.transaction(tx => keep(tx, trackId, result))
  }
  catch (error) {
    const failure = giveUp(error, run)
    if (!failure) {
      if (track.clipId) await setTask(database, { id: track.clipId, sessionId: track.sessionId }, 'read-captions', { state: 'waiting', message: whyAgain(error, run).replace('The clip is', 'The captions are') })
      throw error
    }
    const message = failure.code === 'missing-object' ? 'The caption file could not be found in the storage. Upload it again.' : failure.message.replace('The clip', 'The caption file')
    await database.transaction(tx => keep(tx, trackId, message))
  }
}

/** What is in the file, or in words why nothing can be read. */
function readAll(bytes: Buffer, name: string): CaptionReading | string {
  try {
    return read(bytes, { name })
  }
  catch (error) {
    if (error instanceof DomainError) return error.message.replace('Nothing was changed.', 'The file is kept as uploaded.')
    throw error
  }
}

async function keep(tx: Transaction, trackId: string, result: CaptionReading | string): Promise<void> {
  const [track] = await tx.select().from(captionTracks).where(eq(captionTracks.id, trackId)).for('update')
  if (!track) return
  if (typeof result === 'string') {
    await tx.update(captionTracks).set({ failure: result, doubt: null, warnings: [], read: false }).where(eq(captionTracks.id, trackId))
  }
  else {
    const { list, warnings } = storable(result)
    const durationMs = await durationOf(tx, track)
    const doubt = durationMs === null ? null : checkAgainstClip(list, durationMs)
    if (track.clipId) await insertCues(tx, track, track.clipId, list)
    if (track.clipId) await enqueuePencilling(tx, track.sessionId)
    await tx.update(captionTracks).set({ failure: null, doubt, warnings, read: track.clipId !== null }).where(eq(captionTracks.id, trackId))
  }
  if (track.clipId) await settle(tx, track.clipId, track.sessionId)
  await announce(tx, { sessionId: track.sessionId, kind: 'captions', id: trackId })
}

function storable(reading: CaptionReading): { list: Cue[], warnings: string[] } {
  let cut = 0
  const list = cuesForStorage(reading.cues).map((cue) => {
    // PostgreSQL keeps no NUL.
    const text = cue.text.replaceAll('\0', '\uFFFD')
    if (text.length > LONGEST_CUE) cut++
    return { ...cue, id: cue.id.replaceAll('\0', '\uFFFD').slice(0, 500), text: text.slice(0, LONGEST_CUE) }
  })
  const warnings = cut ? [`${cut === 1 ? '1 caption is' : `${cut} captions are`} longer than ${LONGEST_CUE} characters and shown only so far. The file is kept as uploaded.`] : []
  return { list, warnings: [...warnings, ...reading.warnings] }
}

async function durationOf(tx: Transaction, track: CaptionTrack): Promise<number | null> {
  if (!track.clipId) return null
  const [clip] = await tx.select({ durationMs: clips.durationMs }).from(clips).where(eq(clips.id, track.clipId))
  return clip?.durationMs ?? null
}

async function insertCues(tx: Transaction, track: CaptionTrack, clipId: string, list: Cue[]): Promise<void> {
  const [known] = await tx.select({ id: cues.id }).from(cues).where(eq(cues.trackId, track.id)).limit(1)
  if (known) return
  for (let at = 0; at < list.length; at += BATCH) {
    await tx.insert(cues).values(list.slice(at, at + BATCH).map(({ id, ...cue }) => ({ ...cue, label: id, trackId: track.id, clipId, buildId: track.buildId })))
  }
  await refreshPassages(tx, clipId)
}

/** One row stands for all caption files of a clip: failed if one could not be read, done when all are. */
async function settle(tx: Transaction, clipId: string, sessionId: string): Promise<void> {
  const tracks = await tx.select({ read: captionTracks.read, failure: captionTracks.failure, name: captionTracks.name }).from(captionTracks).where(eq(captionTracks.clipId, clipId))
  const failed = tracks.find(track => track.failure !== null)
  const done = tracks.filter(track => track.read).length
  await setTask(tx, { id: clipId, sessionId }, 'read-captions', failed
    ? { state: 'failed', message: `${failed.name}: ${failed.failure}` }
    : { state: done === tracks.length ? 'done' : 'waiting', progress: tracks.length ? done / tracks.length : 1 })
}
