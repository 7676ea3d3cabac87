import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { eq, sql } from 'drizzle-orm'
import { chapters, type Clip, pencillings } from '#server/database/schema'
import { addCaptionFile } from '#server/services/captions'
import { listChapters } from '#server/services/chapters'
import { importTable } from '#server/services/planImport'
import { demoBuild } from '../../../workers/demo/index'
import { type MediaBench, openMediaBench } from '../../support/mediaBench'
import { makeClip } from '../../support/rows'
import { until } from '../../support/until'

/** The job with a real worker: after captions, by itself, and again after a worker that was killed. */
let bench: MediaBench
let clip: Clip
const spoken = demoBuild.sessions[0]!.clips[1]!
const TIME = 60_000

beforeAll(async () => {
  bench = await openMediaBench()
  for (const file of [demoBuild.partsFile, demoBuild.planFile]) await importTable(bench.database.database, bench.build.id, { file: readFileSync(file).toString('base64') })
  clip = await makeClip(bench.database.database, bench.session, { name: spoken.name, durationMs: spoken.durationMs })
}, TIME)
afterAll(() => bench.close())

const state = async () => (await bench.database.database.select().from(pencillings).where(eq(pencillings.sessionId, bench.session.id)))[0]?.state
const list = () => listChapters(bench.database.database, { sessionId: bench.session.id })

describe('suggest-chapters', () => {
  it('waits from the moment that captions are read, and a worker that is killed over it leaves it to the next', async () => {
    const db = bench.database.database
    await addCaptionFile(db, bench.storage.storage, bench.session.id, bench.builder.id, { name: spoken.captions.split('/').at(-1)!, bytes: readFileSync(spoken.captions) })
    // The first worker comes as far as the session's lock, which is held against it, and dies there.
    const lock = await bench.database.pool.connect()
    await lock.query('begin')
    await lock.query('select id from sessions where id = $1 for no key update', [bench.session.id])
    const first = await bench.startWorker({ concurrency: 1 })
    await until(async () => await state() === 'working')
    await first.stop('SIGKILL')
    await lock.query('rollback')
    lock.release()
    expect(await list()).toEqual([])

    await bench.startWorker({ concurrency: 1 })
    await until(async () => await state() === 'done')
    const rows = await list()
    expect(rows.length).toBeGreaterThan(0)
    expect(rows.every(one => one.proposed && one.clipId === clip.id)).toBe(true)
    const { rows: [left] } = await db.execute<{ count: number }>(sql`select count(*)::int count from graphile_worker.jobs`)
    expect(left!.count).toBe(0)
  }, 3 * TIME)

  it('does nothing about a session that is gone and refuses what is no payload', async () => {
    const { suggestChapters } = await import('../../../workers/media/suggestChapters')
    const context = { database: bench.database.database, storage: bench.storage.storage } as never
    const run = { signal: new AbortController().signal, attempt: 1, maxAttempts: 10 }
    await expect(suggestChapters(context, { sessionId: crypto.randomUUID() }, run)).resolves.toBeUndefined()
    await expect(suggestChapters(context, { sessionId: 'all of them' }, run)).rejects.toThrow()
    expect(await bench.database.database.select({ id: chapters.id }).from(chapters).where(eq(chapters.proposed, false))).toEqual([])
  })
})
