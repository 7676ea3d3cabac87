import { eq } from 'drizzle-orm'
import { z } from 'zod'
import type { Transaction } from '#server/database/client'
import { type Clip, clips } from '#server/database/schema'
import { lockSession } from '#server/services/clips'
import { countAttempt, failTask, setTask, settleClip } from '#server/services/clipTasks'
import type { ClipTask } from '#shared/types/trade'
import type { JobRun, WorkerContext } from './context'
import { ClipFault } from './ffmpeg/faults'
import { giveUp, whyAgain } from './failures'
import { type Report, reporter } from './progress'

export interface ClipWork { context: WorkerContext, clip: Clip, signal: AbortSignal, report: Report }
/** What a job leaves behind, written in one transaction with the end of its task. */
export type Outcome = (tx: Transaction) => Promise<void>

const payloadSchema = z.object({ clipId: z.uuid() })

/**
 * A job on one clip. Checks its payload again, does nothing when the clip is gone, keeps the task's row true
 * whatever happens, and writes results, the end of the task and the jobs that follow together, so that a worker
 * killed at any moment leaves either the state before or the state after.
 */
export function clipJob(task: Exclude<ClipTask, 'read-captions'>, work: (given: ClipWork) => Promise<Outcome>) {
  return async (context: WorkerContext, payload: unknown, run: JobRun): Promise<void> => {
    const { clipId } = payloadSchema.parse(payload)
    const { database } = context
    const [clip] = await database.select().from(clips).where(eq(clips.id, clipId))
    if (!clip || clip.state === 'uploading') return
    await database.transaction(async (tx) => {
      await setTask(tx, clip, task, { state: 'working' })
      await countAttempt(tx, clipId, task)
      await settleClip(tx, clipId)
    })
    const progress = reporter(database, clip, task)
    try {
      const outcome = await work({ context, clip, signal: run.signal, report: progress.report })
      await progress.settled()
      await database.transaction(async (tx) => {
        // What a clip turns out to be may move the others of its session: session before clip, as everywhere.
        await lockSession(tx, clip.sessionId)
        const [standing] = await tx.select({ id: clips.id }).from(clips).where(eq(clips.id, clipId)).for('no key update')
        if (!standing) return
        await outcome(tx)
        await setTask(tx, clip, task, { state: 'done' })
        await settleClip(tx, clipId)
      })
    }
    catch (error) {
      await progress.settled()
      await afterFailure(context, clip, task, error, run)
    }
  }
}

async function afterFailure({ database }: WorkerContext, clip: Clip, task: ClipTask, error: unknown, run: JobRun): Promise<void> {
  const [standing] = await database.select({ id: clips.id }).from(clips).where(eq(clips.id, clip.id))
  if (!standing) return
  const failure = error instanceof ClipFault && error.failure.code !== 'out-of-space' ? error.failure : giveUp(error, run)
  if (failure) {
    await database.transaction(tx => failTask(tx, clip, task, failure))
    return
  }
  await setTask(database, clip, task, { state: 'waiting', message: whyAgain(error, run) })
  throw error
}
