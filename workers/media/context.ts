import type { Storage } from '#server/adapters/storage'
import type { Database } from '#server/database/client'
import type { Originals } from './originals'

/** What every job is given. */
export interface WorkerContext {
  database: Database
  storage: Storage
  /** Local copies of stored files, shared by the jobs of this process. */
  originals: Originals
}

/** One run of a job. */
export interface JobRun {
  /** Fires when the worker has to stop. */
  signal: AbortSignal
  /** This try, from 1. */
  attempt: number
  maxAttempts: number
}
