import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { clipTasks } from '#server/database/schema'
import { readBench } from '#server/services/bench'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeSession, makeStep } from '../support/rows'

let database: TestDatabase
beforeAll(async () => {
  database = await testDatabase()
})
afterAll(() => database.drop())

describe('the bench', () => {
  it('is empty for a new build', async () => {
    const build = await makeBuild(database.database)
    expect(await readBench(database.database, build, 'builder')).toMatchObject({
      counts: { steps: 0, sessions: 0, clips: 0, chapters: 0 }, indexing: [], untagged: { clips: 0, ms: 0, longest: [] }, pencilled: { count: 0, first: [] }, unfilmed: { shown: 0, steps: [] }, next: [], sessions: [],
    })
  })

  it('names what waits, and its place', async () => {
    const db = database.database
    const build = await makeBuild(db)
    const [done, begun, ahead] = [await makeStep(db, build, { status: 'done' }), await makeStep(db, build, { status: 'under-way' }), await makeStep(db, build)]
    await makeStep(db, build, { archivedAt: new Date() })
    const session = await makeSession(db, build)
    const clip = await makeClip(db, session, { durationMs: 100_000 })
    const tagged = await makeClip(db, session, { durationMs: 62_000 })
    const working = await makeClip(db, session, { state: 'working' })
    const failed = await makeClip(db, session, { state: 'failed', failure: { code: 'truncated', message: 'The file ends before its time.' } })
    await db.insert(clipTasks).values({ clipId: working.id, task: 'index-footage', state: 'working', progress: 0.5, message: 'Reading pictures' })
    await makeChapter(db, clip, { startMs: 10_000, endMs: 30_000, stepId: begun!.id })
    await makeChapter(db, clip, { startMs: 32_000, endMs: 50_000, stepId: begun!.id, inking: 'pencilled', confidence: 0.4 })
    await makeChapter(db, tagged, { startMs: 0, endMs: 60_000, stepId: begun!.id })
    await makeClip(db, await makeSession(db, await makeBuild(db)), { durationMs: 900_000 })

    const bench = await readBench(db, build, 'crew')
    expect(bench.indexing).toMatchObject([{ id: failed.id, message: 'The file ends before its time.' }, { id: working.id, progress: 0.5, message: 'Reading pictures' }])
    expect(bench.untagged).toMatchObject({ clips: 1, ms: 60_000, longest: [{ clipId: clip.id, startMs: 50_000, endMs: 100_000 }, { clipId: clip.id, startMs: 0, endMs: 10_000 }] })
    expect(bench.pencilled).toMatchObject({ count: 1, first: [{ clipId: clip.id, startMs: 32_000, step: { number: begun!.number } }] })
    expect(bench.unfilmed).toMatchObject({ shown: 1, steps: [{ id: done!.id }] })
    expect(bench.next.map(step => step.id)).toEqual([begun!.id, ahead!.id])
    expect(bench.sessions).toMatchObject([{ id: session.id, clips: 4, chapters: 3 }])
    expect(bench.counts).toEqual({ steps: 3, sessions: 1, clips: 4, chapters: 3 })
  })
})
