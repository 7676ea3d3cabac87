import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { cues } from '#server/database/schema'
import { countHoldings } from '#server/services/holdings'
import { testDatabase, type TestDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeCues, makeSession } from '../support/rows'

let handle: TestDatabase
beforeAll(async () => {
  handle = await testDatabase()
})
afterAll(() => handle.drop())

it('counts what hangs on a clip, a session and a build, and nothing of others', async () => {
  const db = handle.database
  const build = await makeBuild(db)
  const [first, second] = [await makeSession(db, build), await makeSession(db, build)]
  const one = await makeClip(db, first, { durationMs: 60_000 })
  const two = await makeClip(db, first, { durationMs: null })
  const three = await makeClip(db, second, { durationMs: 5000 })
  await makeChapter(db, one)
  await makeChapter(db, three, { inking: 'pencilled', endMs: 5000 })
  const [, heard] = await makeCues(db, one, ['mix', 'spread'])
  await db.update(cues).set({ originalText: 'bread' }).where(eq(cues.id, heard!.id))
  await makeCues(db, two, ['clamp'])
  const elsewhere = await makeClip(db, await makeSession(db, await makeBuild(db)))
  await makeChapter(db, elsewhere)

  expect(await countHoldings(db, 'clip', one.id)).toEqual({ sessions: 0, clips: 0, footageMs: 60_000, chapters: 1, inked: 1, captions: 2, corrected: 1 })
  expect(await countHoldings(db, 'session', first.id)).toEqual({ sessions: 0, clips: 2, footageMs: 60_000, chapters: 1, inked: 1, captions: 3, corrected: 1 })
  expect(await countHoldings(db, 'build', build.id)).toEqual({ sessions: 2, clips: 3, footageMs: 65_000, chapters: 2, inked: 1, captions: 3, corrected: 1 })
  expect(await countHoldings(db, 'build', (await makeBuild(db)).id)).toEqual({ sessions: 0, clips: 0, footageMs: 0, chapters: 0, inked: 0, captions: 0, corrected: 0 })
})
