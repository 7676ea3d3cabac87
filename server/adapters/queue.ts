import { sql } from 'drizzle-orm'
import type { Executor } from '../database/client'

/** Jobs and what each is given. One file a job in workers/media/. */
export interface JobPayloads {
  'probe-clip': { clipId: string }
  'index-footage': { clipId: string }
  'make-proxy': { clipId: string }
  'read-captions': { trackId: string }
  /** Pencils a session: chapters, facts and what was told but not shown. */
  'suggest-chapters': { sessionId: string }
  /** Everything stored under a prefix, and an upload into it that never ended. */
  'remove-objects': { prefix: string, upload?: { key: string, uploadId: string } }
}
export type JobName = keyof JobPayloads

/** Waits grow by e each time: ten tries outlast a storage that is away for two hours. */
export const MAX_ATTEMPTS = 10

/** Lower goes first. Pencilling is short and somebody is looking at it; footage takes minutes. */
const PRIORITY: Partial<Record<JobName, number>> = { 'suggest-chapters': -10 }

/**
 * Adds a job in the caller's transaction: the row and its job are written together or not at all.
 * One job per name and subject waits at a time (`job_key`); adding it again moves it to the front.
 */
export async function addJob<Name extends JobName>(executor: Executor, name: Name, payload: JobPayloads[Name]): Promise<void> {
  const key = `${name}:${Object.values(payload)[0]}`
  await executor.execute(sql`
    select graphile_worker.add_job(${name}::text, ${JSON.stringify(payload)}::json, job_key := ${key}::text, max_attempts := ${MAX_ATTEMPTS}::int, priority := ${PRIORITY[name] ?? 0}::int)`)
}
