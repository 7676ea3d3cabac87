import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { eq } from 'drizzle-orm'
import { type Build, type Clip, clips, clipTasks, type ClipTaskRow, type Session, type User } from '#server/database/schema'
import { testDatabase, type TestDatabase } from './database'
import { startTestWorker, type TestWorker } from './mediaWorker'
import { makeBuild, makeSession, makeUser } from './rows'
import { startTestStorage, type TestStorage } from './storage'
import { until } from './until'
import { uploadFile } from './uploading'

/** Database, storage and a session to upload into, for tests of the media worker. Everything is real. */
export interface MediaBench {
  database: TestDatabase
  storage: TestStorage
  builder: User
  build: Build
  session: Session
  /** Where workers keep local copies. */
  tempDir: string
  startWorker: (options?: { concurrency?: number }) => Promise<TestWorker>
  upload: (file: string | { name: string, bytes: Buffer }, into?: Session) => Promise<string>
  clip: (id: string) => Promise<Clip | undefined>
  task: (clipId: string, task: ClipTaskRow['task']) => Promise<ClipTaskRow | undefined>
  /** Waits until nothing more will happen to a clip by itself. */
  settled: (clipId: string) => Promise<Clip>
  close: () => Promise<void>
}

export async function openMediaBench(): Promise<MediaBench> {
  const folder = await mkdtemp(join(tmpdir(), 'ribband-media-bench-'))
  const tempDir = join(folder, 'temp')
  const database = await testDatabase()
  const storage = await startTestStorage()
  const builder = await makeUser(database.database)
  const build = await makeBuild(database.database, {}, { builder })
  const session = await makeSession(database.database, build)
  const workers: TestWorker[] = []
  const clip = async (id: string) => (await database.database.select().from(clips).where(eq(clips.id, id)))[0]
  return {
    database, storage, builder, build, session, tempDir, clip,
    startWorker: async (options) => {
      const worker = await startTestWorker(database, storage, { tempDir, ...options })
      workers.push(worker)
      return worker
    },
    upload: (file, into = session) => uploadFile(database.database, storage.storage, into.id, builder.id, file),
    task: async (clipId, task) => (await database.database.select().from(clipTasks).where(eq(clipTasks.clipId, clipId))).find(row => row.task === task),
    settled: clipId => until(async () => {
      const row = await clip(clipId)
      return row && ['ready', 'failed'].includes(row.state) && row
    }),
    close: async () => {
      await Promise.all(workers.map(worker => worker.stop('SIGKILL')))
      await storage.stop()
      await database.drop()
      await rm(folder, { recursive: true, force: true })
    },
  }
}
