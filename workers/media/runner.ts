import { EventEmitter } from 'node:events'
import { sql } from 'drizzle-orm'
import { Logger, parseCronItems, run, type Runner, type TaskList, type WorkerEvents } from 'graphile-worker'
import type { DatabaseHandle } from '#server/database/client'
import type { WorkerContext } from './context'
import { DeadWorkers, SignOfLife } from './deadWorkers'
import { indexFootage } from './indexFootage'
import { makeProxy } from './makeProxy'
import { probeClip } from './probeClip'
import { pruneStorage } from './pruneStorage'
import { readCaptions } from './readCaptions'
import { removeObjects } from './removeObjects'
import { suggestChapters } from './suggestChapters'

const TASKS = {
  'probe-clip': probeClip,
  'index-footage': indexFootage,
  'make-proxy': makeProxy,
  'read-captions': readCaptions,
  'suggest-chapters': suggestChapters,
  'remove-objects': removeObjects,
  'prune-storage': pruneStorage,
}

/** Running jobs may end by themselves so long when the worker is asked to stop; then they are told to. */
const FINISH_MS = 3000
const LOOK_MS = 1500
const RESTART_MS = 1000
const POLL_MS = 1000

export interface MediaWorker { stop: () => Promise<void> }

/**
 * Takes jobs from the queue until stopped. When the database goes away the queue gives up; it is started afresh
 * until the database is back.
 */
export async function startMediaWorker(context: WorkerContext, handle: DatabaseHandle, options: { url: string, concurrency: number, log: (line: string) => void }): Promise<MediaWorker> {
  const life = new SignOfLife(options.url)
  const dead = new DeadWorkers(context.database)
  const interrupted = new Set<string>()
  let runner: Runner | undefined
  let stopping = false

  const looking = setInterval(() => void dead.look().catch(() => {}), LOOK_MS)
  await begin()
  const ended = keepRunning()

  async function begin(): Promise<void> {
    const events = new EventEmitter() as WorkerEvents
    const alive = new Promise<void>((resolve) => {
      events.on('pool:create', ({ workerPool }) => void life.hold(workerPool.id).then(resolve))
    })
    runner = await run({
      pgPool: handle.pool, concurrency: options.concurrency, noHandleSignals: true, pollInterval: POLL_MS, gracefulShutdownAbortTimeout: FINISH_MS, events,
      logger: quiet(options.log), taskList: taskList(context, interrupted),
      parsedCronItems: parseCronItems([{ task: 'prune-storage', match: '17 3 * * *', options: { backfillPeriod: 86_400_000, jobKey: 'prune-storage', maxAttempts: 3 } }]),
    })
    await alive
  }

  async function keepRunning(): Promise<void> {
    while (!stopping) {
      await runner?.promise.catch((error: Error) => options.log(`The queue stopped: ${error.message}`))
      runner = undefined
      if (stopping) return
      await new Promise(resolve => setTimeout(resolve, RESTART_MS))
      if (!stopping) await begin().catch((error: Error) => options.log(`The queue cannot be reached: ${error.message}`))
    }
  }

  return {
    stop: async () => {
      stopping = true
      clearInterval(looking)
      await runner?.stop().catch(() => {})
      await ended
      await giveBack(context, interrupted)
      await life.close()
    },
  }
}

function taskList(context: WorkerContext, interrupted: Set<string>): TaskList {
  return Object.fromEntries(Object.entries(TASKS).map(([name, work]) => [name, async (payload: unknown, { job, abortSignal }: Parameters<NonNullable<TaskList[string]>>[1]) => {
    try {
      await work(context, payload, { signal: abortSignal, attempt: job.attempts, maxAttempts: job.max_attempts })
    }
    catch (error) {
      if (abortSignal.aborted) interrupted.add(String(job.id))
      throw error
    }
  }]))
}

/** Jobs that were cut short by a stop have not failed: the next worker takes them at once. */
async function giveBack({ database }: WorkerContext, interrupted: Set<string>): Promise<void> {
  if (!interrupted.size) return
  await database.execute(sql`
    select graphile_worker.reschedule_jobs(array[id], run_at := now(), attempts := greatest(attempts - 1, 0))
    from graphile_worker.jobs where id = any(${sql.param([...interrupted])}::bigint[]) and locked_at is null`).catch(() => {})
}

/** graphile-worker tells of every job; what matters is in the clip's task, so only faults of the queue are logged. */
function quiet(log: (line: string) => void): Logger {
  return new Logger(() => (level, message) => {
    if (level === 'error' || level === 'warning') log(message.split('\n')[0]!)
  })
}
