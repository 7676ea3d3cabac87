import { readdir } from 'node:fs/promises'
import { eq, sql } from 'drizzle-orm'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { clips, clipTasks, uploads } from '#server/database/schema'
import { deleteClip } from '#server/services/clips'
import { retryClip } from '#server/services/clipTasks'
import { beginUpload } from '#server/services/uploads'
import { DeadWorkers } from '../../../workers/media/deadWorkers'
import { Originals } from '../../../workers/media/originals'
import { pruneStorage } from '../../../workers/media/pruneStorage'
import { makeClip } from '../../support/clips'
import { type MediaBench, openMediaBench } from '../../support/mediaBench'
import type { TestWorker } from '../../support/mediaWorker'
import { startTestWorker } from '../../support/mediaWorker'
import { makeSession } from '../../support/rows'
import { until } from '../../support/until'
import { fingerprintOf } from '../../support/uploading'

let bench: MediaBench
const running: TestWorker[] = []
const start = async (options?: { concurrency?: number }) => {
  const worker = await bench.startWorker(options)
  running.push(worker)
  return worker
}

beforeAll(async () => {
  bench = await openMediaBench()
})
afterEach(async () => {
  await Promise.all(running.splice(0).map(worker => worker.stop()))
})
afterAll(() => bench.close())

const working = (clipId: string, task: 'probe-clip' | 'make-proxy' | 'index-footage') => until(async () => (await bench.task(clipId, task))?.state === 'working', 5)
const keysOf = async (clipId: string) => {
  const keys: string[] = []
  for await (const { key } of bench.storage.storage.list(`clips/${clipId}/`)) keys.push(key)
  return keys
}

describe('a worker that is killed', () => {
  it.each(['probe-clip', 'make-proxy'] as const)('with -9 in the middle of %s: the next one finishes within seconds', async (task) => {
    const session = await makeSession(bench.database.database, bench.build)
    const first = await start()
    // The same content may be in one build only once.
    await bench.database.database.delete(clips)
    const clipId = await bench.upload(await makeClip('numbered-long-gop'), session)
    await working(clipId, task)
    await first.stop('SIGKILL')
    expect((await bench.clip(clipId))!.state).not.toBe('ready')
    const left = await readdir(bench.tempDir)
    await start()
    const clip = await bench.settled(clipId)
    expect(clip).toMatchObject({ state: 'ready', failure: null })
    expect(clip.footage!.sheets!.count).toBeGreaterThan(0)
    // What the dead one had fetched was cleared away when the next one started.
    const now = await readdir(bench.tempDir)
    expect(left.filter(name => now.includes(name))).toEqual([])
  }, 120_000)

  it('by a plain stop: ends cleanly and gives the job back without counting the try', async () => {
    await bench.database.database.delete(clips)
    const first = await start({ concurrency: 1 })
    const clipId = await bench.upload(await makeClip('numbered-long-gop'))
    await working(clipId, 'probe-clip')
    expect(await first.stop('SIGTERM')).toBe(0)
    expect((await readdir(bench.tempDir)).filter(name => name.includes(`-${first.process.pid}-`))).toEqual([])
    const { rows } = await bench.database.database.execute<{ locked_by: string | null, attempts: number, due: boolean }>(sql`select locked_by, attempts, run_at <= now() due from graphile_worker.jobs where key like ${`%:${clipId}`}`)
    for (const job of rows) expect(job).toMatchObject({ locked_by: null, attempts: 0, due: true })
    await start()
    expect((await bench.settled(clipId)).state).toBe('ready')
  }, 120_000)
})

describe('what is not the clip’s fault', () => {
  it('a storage that is away: the task waits, says so, and goes on by itself', async () => {
    await bench.database.database.delete(clips)
    const astray = await startTestWorker(bench.database, { ...bench.storage, config: { ...bench.storage.config, endpoint: 'http://127.0.0.1:9' } }, { tempDir: bench.tempDir })
    running.push(astray)
    const clipId = await bench.upload(await makeClip('good'))
    const task = await until(async () => {
      const row = await bench.task(clipId, 'probe-clip')
      return row?.message.includes('storage cannot be reached') && row
    })
    expect(task).toMatchObject({ state: 'waiting' })
    expect(task.message).toContain('The clip is kept')
    await astray.stop()
    await start()
    expect((await bench.settled(clipId)).state).toBe('ready')
  }, 90_000)

  it('a file that is gone from the storage: fails with words, and can be tried again once it is back', async () => {
    await bench.database.database.delete(clips)
    const bytes = await import('node:fs/promises').then(async fs => fs.readFile(await makeClip('good')))
    const clipId = await bench.upload({ name: 'good.mp4', bytes })
    const { objectKey } = (await bench.clip(clipId))!
    await bench.storage.storage.remove([objectKey])
    await start()
    expect(await bench.settled(clipId)).toMatchObject({ state: 'failed', failure: { code: 'missing-object' } })
    await bench.storage.storage.write(objectKey, bytes, 'application/octet-stream')
    expect(await retryClip(bench.database.database, clipId, bench.builder.id)).toBe(1)
    expect(await until(async () => (await bench.clip(clipId))!.state === 'ready')).toBe(true)
  }, 60_000)

  it('bytes that changed on the way are noticed', async () => {
    await bench.database.database.delete(clips)
    const clipId = await bench.upload(await makeClip('good'))
    await bench.database.database.update(clips).set({ contentHash: 'a'.repeat(64) }).where(eq(clips.id, clipId))
    await start()
    expect(await bench.settled(clipId)).toMatchObject({ state: 'failed', failure: { code: 'damaged' } })
  }, 60_000)
})

it('a clip deleted in the middle of its work leaves nothing behind', async () => {
  await bench.database.database.delete(clips)
  await start()
  const clipId = await bench.upload(await makeClip('numbered-long-gop'))
  await working(clipId, 'make-proxy')
  await deleteClip(bench.database.database, clipId, bench.builder.id)
  await until(async () => (await bench.database.database.execute(sql`select 1 from graphile_worker.jobs where key like ${`%${clipId}%`} or locked_at is not null`)).rowCount === 0)
  const originals = await Originals.open(bench.storage.storage, bench.tempDir)
  await pruneStorage({ database: bench.database.database, storage: bench.storage.storage, originals })
  await originals.close()
  expect(await keysOf(clipId)).toEqual([])
}, 90_000)

it('a job that took its worker down every time is given up, with words', async () => {
  await bench.database.database.delete(clips)
  const clipId = await bench.upload(await makeClip('good'))
  await bench.database.database.execute(sql`update graphile_worker._private_jobs set attempts = max_attempts, locked_by = 'pool-long-dead', locked_at = now() where key = ${`probe-clip:${clipId}`}`)
  await bench.database.database.update(clipTasks).set({ state: 'working' }).where(eq(clipTasks.clipId, clipId))
  const dead = new DeadWorkers(bench.database.database, 0)
  expect(await dead.look()).toEqual(['pool-long-dead'])
  expect(await bench.clip(clipId)).toMatchObject({ state: 'failed', failure: { code: 'internal' } })
  expect(await retryClip(bench.database.database, clipId, bench.builder.id)).toBe(1)
  expect((await bench.clip(clipId))!.state).toBe('waiting')
})

it('the daily round gives up uploads that stopped a week ago, keeps younger ones, and clears objects of nobody', async () => {
  const { database } = bench.database
  await database.delete(clips)
  const begin = async (name: string) => {
    const bytes = Buffer.from(name.repeat(100))
    const begun = await beginUpload(database, bench.storage.storage, bench.session.id, bench.builder.id, { name, sizeBytes: bytes.length, contentType: '', fingerprint: fingerprintOf(bytes) })
    return (begun as { clipId: string }).clipId
  }
  const [old, young] = [await begin('old.mp4'), await begin('young.mp4')]
  await database.update(uploads).set({ updatedAt: new Date(Date.now() - 8 * 86_400_000) }).where(eq(uploads.clipId, old))
  const nobody = `clips/${crypto.randomUUID()}/original`
  await bench.storage.storage.write(nobody, 'left over', 'application/octet-stream')
  await bench.storage.storage.write('something-else', 'not ours', 'text/plain')
  const originals = await Originals.open(bench.storage.storage, bench.tempDir)
  await pruneStorage({ database, storage: bench.storage.storage, originals })
  await originals.close()
  expect(await bench.clip(old)).toBeUndefined()
  expect(await bench.clip(young)).toMatchObject({ state: 'uploading' })
  expect(await bench.storage.storage.head(nobody)).toBeNull()
  expect(await bench.storage.storage.head('something-else')).not.toBeNull()
})
