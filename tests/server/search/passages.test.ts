import { asc, eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Build, type Clip, chapters, cues, passages } from '#server/database/schema'
import { clipCaptions } from '#server/services/media'
import { changePart } from '#server/services/parts'
import { refreshPassages } from '#server/services/search/passages'
import { type TestDatabase, testDatabase } from '../../support/database'
import { makeBuild, makeChapter, makeClip, makeCues, makePart, makeSession } from '../../support/rows'

let database: TestDatabase
let build: Build, clip: Clip
beforeAll(async () => {
  database = await testDatabase()
  build = await makeBuild(database.database)
  clip = await makeClip(database.database, await makeSession(database.database, build))
  await makeCues(database.database, clip, Array.from({ length: 30 }, (_, i) => `line ${i} about the sapele cheek`))
})
afterAll(() => database.drop())

const read = () => database.database.select().from(passages).where(eq(passages.clipId, clip.id)).orderBy(asc(passages.startMs))
const count = async (stem: string) => (await database.pool.query('select passages from search_words where build_id = $1 and stem = $2', [build.id, stem])).rows[0]?.passages as number | undefined
const refresh = () => database.database.transaction(tx => refreshPassages(tx, clip.id))

describe('passages', () => {
  it('come from captions, and are counted', async () => {
    await refresh()
    const rows = await read()
    expect(rows.flatMap(row => row.lines).length).toBe(30)
    expect(await count('sapel')).toBe(rows.length)
    expect(await count('')).toBe(rows.length)
  })

  it('stand still when nothing changed', async () => {
    const before = await read()
    await refresh()
    expect(await read()).toEqual(before)
  })

  it('change only where something changed', async () => {
    const before = await read()
    const [first] = await database.database.select().from(cues).where(eq(cues.clipId, clip.id)).orderBy(asc(cues.startMs)).limit(1)
    await database.database.update(cues).set({ text: 'a greenheart stem' }).where(eq(cues.id, first!.id))
    await refresh()
    const after = await read()
    expect(after.slice(1).map(row => row.id)).toEqual(before.slice(1).map(row => row.id))
    expect(after[0]!.id).not.toBe(before[0]!.id)
    expect(await count('greenheart')).toBe(1)
  })

  it('are cut anew by a chapter, and go with it', async () => {
    const bow = await makePart(database.database, build, { name: 'bow transom' })
    const chapter = await makeChapter(database.database, clip, { startMs: 20_000, endMs: 44_000 }, [bow])
    await refresh()
    expect((await read()).filter(row => row.chapterId === chapter.id).flatMap(row => row.starts)).toEqual([20_000, 24_000, 28_000, 32_000, 36_000, 40_000])
    expect((await read()).find(row => row.chapterId === chapter.id)!.lexemes).toContain('\'t:bow\'')
    await changePart(database.database, build.id, bow.id, { name: 'prow board' })
    expect((await read()).find(row => row.chapterId === chapter.id)!.lexemes).toContain('\'t:prow\'')
    await database.database.delete(chapters).where(eq(chapters.id, chapter.id))
    expect((await read()).some(row => row.chapterId === chapter.id)).toBe(false)
    await refresh()
    expect((await read()).flatMap(row => row.lines).length).toBe(30)
    expect(await count('')).toBe((await read()).length)
  })

  it('are right after several people change chapters of a build at once', async () => {
    const others = await Promise.all(Array.from({ length: 4 }, async () => {
      const other = await makeClip(database.database, { id: clip.sessionId, buildId: build.id })
      await makeCues(database.database, other, Array.from({ length: 20 }, (_, i) => `zinc ${i} and alder`))
      return other
    }))
    await Promise.all([...others, ...others].map(other => database.database.transaction(tx => refreshPassages(tx, other.id))))
    const { rows } = await database.pool.query('select count(*)::int as n from passages where build_id = $1', [build.id])
    expect(await count('')).toBe(rows[0].n)
    const alder = await database.pool.query(`select count(*)::int as n from passages where build_id = $1 and lexemes @@ '''alder'''::tsquery`, [build.id])
    expect(await count('alder')).toBe(alder.rows[0].n)
  })

  it('ask nothing of a clip that is gone', async () => {
    await expect(refreshPassages(database.database, '00000000-0000-4000-8000-000000000000')).resolves.toBeUndefined()
  })
})

it('gives guests the captions of inked chapters only', async () => {
  const [track] = await database.database.selectDistinct({ id: cues.trackId }).from(cues).where(eq(cues.clipId, clip.id))
  await makeChapter(database.database, clip, { startMs: 8000, endMs: 12_000 })
  const published = await clipCaptions(database.database, clip, track!.id, { publishedOnly: true })
  expect(published.match(/line \d+/g)).toEqual(['line 2'])
  expect((await clipCaptions(database.database, clip, track!.id)).match(/-->/g)?.length).toBe(30)
})
