import { eq, inArray } from 'drizzle-orm'
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { type Build, builds, chapters, type Clip, clips, type User } from '#server/database/schema'
import { listedPages, watchBuild, watchList, watchMoment, watchStep } from '#server/services/watch'
import type { ProbeResult } from '#shared/types/media'
import type { Visibility } from '#shared/types/trade'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeCues, makePart, makeSession, makeStep, makeUser } from '../support/rows'

const SITE = 'https://ribband.test'
const probe = { container: 'mov,mp4', video: { width: 1280, height: 720 }, audio: null, subtitles: [], proxyReasons: [], warnings: [] } as unknown as ProbeResult
let database: TestDatabase
let build: Build, follower: User, stranger: User, crew: User, shown: Clip, hidden: Clip, unready: Clip

beforeAll(async () => {
  database = await testDatabase()
  const db = database.database
  ;[follower, stranger, crew] = [await makeUser(db), await makeUser(db), await makeUser(db)]
  build = await makeBuild(db, { name: 'Pram', visibility: 'public' }, { builder: await makeUser(db, { name: 'Nell Arden' }), follower, crew })
  const bow = await makePart(db, build, { name: 'bow transom', material: 'plywood', thicknessMm: 9, quantity: 1 })
  const glue = await makeStep(db, build, { title: 'Glue the cheeks', stage: 'Transoms' }, [bow])
  const fit = await makeStep(db, build, { title: 'Fit the knees', stage: 'Inside' })
  await makeStep(db, build, { title: 'Dropped', stage: 'Inside', archivedAt: new Date() })
  const session = await makeSession(db, build, { date: '2026-09-05' })
  shown = await makeClip(db, session, { probe, footage: { poster: { key: 'secret/poster', width: 1280, height: 720 }, sheets: { intervalMs: 5000, tileWidth: 160, tileHeight: 90, columns: 8, rows: 6, count: 20, timesMs: [], images: ['secret/sheet'] }, peaks: null, sceneChangesMs: [], silences: [], method: 'keyframes' } })
  hidden = await makeClip(db, session, { probe })
  unready = await makeClip(db, session, { state: 'failed' })
  await makeCues(db, shown, ['before the chapter', 'in the chapter', 'still in it', 'pencilled words'])
  await makeChapter(db, shown, { startMs: 4000, endMs: 12_000, stepId: glue.id, operation: 'glue', note: 'Clamped overnight' }, [bow])
  await makeChapter(db, shown, { startMs: 12_000, endMs: 20_000, stepId: fit.id, operation: 'dry-fit', inking: 'pencilled', confidence: 0.9 })
  await makeChapter(db, hidden, { stepId: fit.id, operation: 'fasten', inking: 'pencilled', confidence: 0.5 })
  await makeChapter(db, unready, { stepId: fit.id, operation: 'fasten' })
})
afterAll(() => database.drop())
const show = (visibility: Visibility) => database.database.update(builds).set({ visibility }).where(eq(builds.id, build.id))
beforeEach(() => show('public'))

const everything = async (userId: string | null) => JSON.stringify([
  await watchBuild(database.database, userId, build.address, SITE), await watchStep(database.database, userId, build.address, 1, SITE),
  await watchStep(database.database, userId, build.address, 2, SITE), await watchMoment(database.database, userId, build.address, shown.id, SITE), await watchList(database.database, SITE),
])

describe('what is published', () => {
  it('is inked chapters, the clips under them and the captions within them', async () => {
    const page = await watchBuild(database.database, null, build.address, SITE)
    expect(page).toMatchObject({ builder: 'Nell Arden', listed: true, canonical: `${SITE}/watch/${build.address}`, shownMs: 8000, cover: `${SITE}/media/clips/${shown.id}/poster` })
    expect(page.stages).toMatchObject([{ name: 'Transoms', steps: [{ number: 1, chapters: 1, shownMs: 8000 }] }, { name: 'Inside', steps: [{ number: 2, chapters: 0, shownMs: 0, picture: null }] }])
    const moment = await watchMoment(database.database, null, build.address, shown.id, SITE)
    expect(moment.lines.map(line => line.text)).toEqual(['in the chapter', 'still in it'])
    expect(moment.chapters).toMatchObject([{ operation: 'glue', parts: ['bow transom'], note: 'Clamped overnight', picture: { kind: 'tile', url: `/media/clips/${shown.id}/sheets/0` } }])
    expect(moment.clip.src).toBe(`/media/clips/${shown.id}/video`)
  })

  it('never holds pencilled work, hidden clips, names of files or storage, whoever asks', async () => {
    for (const userId of [null, stranger.id, follower.id, crew.id]) {
      const text = await everything(userId)
      for (const secret of ['pencilled', 'before the chapter', 'dry-fit', hidden.id, unready.id, shown.name, shown.objectKey, 'secret/', 'Dropped', 'example.test']) expect(text).not.toContain(secret)
    }
    for (const clip of [hidden, unready]) await expect(watchMoment(database.database, crew.id, build.address, clip.id, SITE)).rejects.toMatchObject({ code: 'not-found' })
  })

  it('goes when ink is rubbed out', async () => {
    const [glue] = await database.database.select().from(chapters).where(eq(chapters.operation, 'glue'))
    await database.database.update(chapters).set({ inking: 'pencilled' }).where(eq(chapters.id, glue!.id))
    await expect(watchMoment(database.database, null, build.address, shown.id, SITE)).rejects.toMatchObject({ code: 'not-found' })
    expect((await watchStep(database.database, null, build.address, 1, SITE)).chapters).toEqual([])
    await database.database.update(chapters).set({ inking: 'inked' }).where(eq(chapters.id, glue!.id))
  })

  it('has steps with parts, materials and the way on', async () => {
    const page = await watchStep(database.database, null, build.address, 1, SITE)
    expect(page).toMatchObject({ step: { title: 'Glue the cheeks', parts: [{ name: 'bow transom', thicknessMm: 9, quantity: 1 }] }, previous: null, next: { number: 2 }, canonical: `${SITE}/watch/${build.address}/steps/1` })
    await expect(watchStep(database.database, null, build.address, 3, SITE)).rejects.toMatchObject({ code: 'not-found' })
    await expect(watchStep(database.database, null, build.address, 99, SITE)).rejects.toMatchObject({ code: 'not-found' })
  })

  it('is shown for watching only once it can be played', async () => {
    await database.database.update(clips).set({ probe: { ...probe, proxyReasons: ['video-codec'] } }).where(eq(clips.id, shown.id))
    expect((await watchMoment(database.database, null, build.address, shown.id, SITE)).clip.src).toBeNull()
    await database.database.update(clips).set({ probe }).where(eq(clips.id, shown.id))
  })
})

describe('the list of builds', () => {
  it('leaves out public builds that show no work, and is read in one query however many there are', async () => {
    const db = database.database
    const mine = await makeUser(db)
    const planned = await makeBuild(db, { name: 'Only planned', visibility: 'public' }, { builder: mine })
    const talk = await makeBuild(db, { name: 'Only talk', visibility: 'public' }, { builder: mine })
    await makeChapter(db, await makeClip(db, await makeSession(db, talk)), { operation: 'none' })
    const long = await makeBuild(db, { name: 'Longer', visibility: 'public' }, { builder: mine })
    const step = await makeStep(db, long)
    const [plain, pictured] = [await makeClip(db, await makeSession(db, long)), await makeClip(db, await makeSession(db, long), { probe, footage: { ...shown.footage!, sheets: null } })]
    for (const clip of [plain, pictured]) await makeChapter(db, clip, { stepId: step.id, endMs: clip === plain ? 90_000 : 30_000 })
    const asked = vi.spyOn(database.pool, 'query')
    const { builds: list } = await watchList(db, SITE)
    expect(asked).toHaveBeenCalledTimes(1)
    asked.mockRestore()
    expect(list).toEqual([
      { address: long.address, name: 'Longer', boat: long.boat, about: long.about, steps: 1, stepsShown: 1, shownMs: 120_000, picture: { kind: 'poster', url: `/media/clips/${pictured.id}/poster`, width: 1280, height: 720 } },
      expect.objectContaining({ address: build.address, steps: 2, stepsShown: 1, shownMs: 8000, picture: (await watchBuild(db, null, build.address, SITE)).picture }),
    ])
    await db.delete(builds).where(inArray(builds.id, [planned.id, talk.id, long.id]))
  })
})

describe('who may watch', () => {
  const opens = (userId: string | null) => watchBuild(database.database, userId, build.address, SITE).then(page => page.listed, error => error.code as string)
  const listed = async () => (await watchList(database.database, SITE)).builds.map(one => one.address)
  const mapped = async () => (await listedPages(database.database)).map(page => page.path)

  it('is anyone, of a public build', async () => {
    expect(await opens(null)).toBe(true)
    expect(await listed()).toEqual([build.address])
    expect(await mapped()).toEqual([`/watch/${build.address}`, `/watch/${build.address}/steps/1`, `/watch/${build.address}/moments/${shown.id}`])
  })
  it('is anyone with the link, of an unlisted one, which no list and no search engine is told of', async () => {
    await show('unlisted')
    for (const userId of [null, stranger.id, follower.id]) expect(await opens(userId)).toBe(false)
    expect(await listed()).toEqual([])
    expect(await mapped()).toEqual([])
  })
  it('is members, of a private one', async () => {
    await show('private')
    for (const userId of [null, stranger.id]) expect(await opens(userId)).toBe('not-found')
    for (const userId of [follower.id, crew.id]) expect(await opens(userId)).toBe(false)
    expect(await listed()).toEqual([])
    expect(await mapped()).toEqual([])
  })
  it('is nobody, of a build that is not there', async () => {
    await expect(watchBuild(database.database, crew.id, '’ or 1=1', SITE)).rejects.toMatchObject({ code: 'not-found' })
  })
})
