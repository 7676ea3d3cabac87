import type { Database } from '#server/database/client'
import type { Clip } from '#server/database/schema'
import { setTask } from '#server/services/clipTasks'
import type { ClipTask } from '#shared/types/trade'

export type Report = (share: number, message: string) => void

/** A page need not hear of more than four steps a second. */
const EVERY_MS = 250

/**
 * Reports how far a job is, at most four times a second and one write at a time: the newest report wins.
 * A report that cannot be written is dropped; the job itself finds out soon enough.
 */
export function reporter(database: Database, clip: Clip, task: ClipTask): { report: Report, settled: () => Promise<void> } {
  let latest: { share: number, message: string } | undefined
  let writing: Promise<void> | undefined
  let closed = false

  async function write(): Promise<void> {
    while (latest && !closed) {
      const { share, message } = latest
      latest = undefined
      await setTask(database, clip, task, { state: 'working', progress: share, message }).catch(() => {})
      await new Promise(resolve => setTimeout(resolve, EVERY_MS))
    }
    writing = undefined
  }

  return {
    report: (share, message) => {
      if (closed) return
      latest = { share, message }
      writing ??= write()
    },
    /** No report comes after this: the job's last word must stand. */
    settled: async () => {
      closed = true
      await writing
    },
  }
}
