import { and, eq, inArray, sql } from 'drizzle-orm'
import type { ClipFailure } from '#shared/types/media'
import type { ClipTask, TaskState } from '#shared/types/trade'
import { isBroken } from '#shared/utils/clipFailures'
import { addJob } from '../adapters/queue'
import type { Database, Executor, Transaction } from '../database/client'
import { captionTracks, type Clip, clips, clipTasks } from '../database/schema'
import { releaseTracks } from './captionHomes'
import { announce } from './live'

type ClipPlace = Pick<Clip, 'id' | 'sessionId'>
export interface TaskChange { state: TaskState, progress?: number, message?: string }

/** Tasks without which a clip cannot be shown; captions may fail and the clip still stands. */
const NEEDED = ['probe-clip', 'index-footage', 'make-proxy'] as const
const MESSAGE_LENGTH = 1000

/** Writes how far a task is and tells the pages that watch the session. */
export async function setTask(executor: Executor, clip: ClipPlace, task: ClipTask, change: TaskChange): Promise<void> {
  const progress = Math.min(1, Math.max(0, change.progress ?? (change.state === 'done' ? 1 : 0)))
  const message = (change.message ?? '').slice(0, MESSAGE_LENGTH)
  const row = { state: change.state, progress, message }
  await executor.insert(clipTasks).values({ clipId: clip.id, task, ...row }).onConflictDoUpdate({ target: [clipTasks.clipId, clipTasks.task], set: { ...row, updatedAt: new Date() } })
  await announce(executor, { sessionId: clip.sessionId, kind: 'task', id: clip.id, task: { clipId: clip.id, task, ...row } })
}

/** A task and its job, written together: the row says "waiting" exactly when a job waits. */
export async function enqueueTask(tx: Transaction, clip: ClipPlace, task: Exclude<ClipTask, 'read-captions'>): Promise<void> {
  await setTask(tx, clip, task, { state: 'waiting' })
  await addJob(tx, task, { clipId: clip.id })
}

/**
 * Works out a clip's state from its tasks and tells the session's pages. Takes the clip's row lock, so that
 * two tasks that end together leave the right state.
 */
export async function settleClip(tx: Transaction, clipId: string): Promise<void> {
  const [clip] = await tx.select({ id: clips.id, sessionId: clips.sessionId, state: clips.state, failure: clips.failure }).from(clips).where(eq(clips.id, clipId)).for('no key update')
  if (!clip || clip.state === 'uploading') return
  const tasks = await tx.select({ task: clipTasks.task, state: clipTasks.state }).from(clipTasks).where(and(eq(clipTasks.clipId, clipId), inArray(clipTasks.task, [...NEEDED])))
  const stateOf = (task: ClipTask) => tasks.find(row => row.task === task)?.state
  const failed = tasks.some(row => row.state === 'failed')
  const done = stateOf('probe-clip') === 'done' && stateOf('index-footage') === 'done' && tasks.every(row => row.state === 'done')
  const begun = tasks.some(row => row.state !== 'waiting')
  const state = failed ? 'failed' : done ? 'ready' : begun ? 'working' : 'waiting'
  await tx.update(clips).set({ state, failure: failed ? clip.failure : null }).where(eq(clips.id, clipId))
  await announce(tx, { sessionId: clip.sessionId, kind: 'clip', id: clipId })
}

/** Ends a task for good, with words for the builder; the clip fails with it unless captions did. */
export async function failTask(tx: Transaction, clip: ClipPlace, task: ClipTask, failure: ClipFailure): Promise<void> {
  await setTask(tx, clip, task, { state: 'failed', message: failure.message })
  if (task !== 'read-captions') {
    await tx.update(clips).set({ failure }).where(eq(clips.id, clip.id))
    if (isBroken({ failure })) await releaseTracks(tx, clip)
  }
  await settleClip(tx, clip.id)
}

/** Puts every failed task of a clip back in the queue. Answers how many there were. */
export async function retryClip(database: Database, clipId: string, by: string): Promise<number> {
  return database.transaction(async (tx) => {
    const [clip] = await tx.select().from(clips).where(eq(clips.id, clipId)).for('no key update')
    if (!clip) return 0
    const failed = await tx.select({ task: clipTasks.task }).from(clipTasks).where(and(eq(clipTasks.clipId, clipId), eq(clipTasks.state, 'failed')))
    if (!failed.length) return 0
    for (const { task } of failed) {
      if (task === 'read-captions') await readTracksAgain(tx, clip)
      else await enqueueTask(tx, clip, task)
    }
    await settleClip(tx, clipId)
    await announce(tx, { sessionId: clip.sessionId, kind: 'clip', id: clipId, by })
    return failed.length
  })
}

/** Puts the reading of all of a clip's captions in the queue: what they are held against has changed. */
export async function readTracksAgain(tx: Transaction, clip: ClipPlace): Promise<void> {
  const tracks = await tx.select({ id: captionTracks.id }).from(captionTracks).where(eq(captionTracks.clipId, clip.id))
  if (!tracks.length) return
  await setTask(tx, clip, 'read-captions', { state: 'waiting' })
  for (const track of tracks) await addJob(tx, 'read-captions', { trackId: track.id })
}

/** Raises a task's count of tries. */
export async function countAttempt(executor: Executor, clipId: string, task: ClipTask): Promise<void> {
  await executor.update(clipTasks).set({ attempts: sql`${clipTasks.attempts} + 1` }).where(and(eq(clipTasks.clipId, clipId), eq(clipTasks.task, task)))
}
