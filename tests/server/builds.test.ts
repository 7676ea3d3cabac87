import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { builds, chapters, clips, memberships, steps, uploads } from '#server/database/schema'
import { changeBuild, createBuild, deleteBuild, listBuilds, newAddress } from '#server/services/builds'
import { clipPrefix, trackKey } from '#server/services/objectKeys'
import { newBuildSchema } from '#shared/schemas/builds'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeCues, makeMember, makeSession, makeStep, makeUser } from '../support/rows'
import { startTestStorage, type TestStorage } from '../support/storage'

let test: TestDatabase
let storage: TestStorage
beforeAll(async () => {
  test = await testDatabase()
  storage = await startTestStorage()
})
afterAll(async () => {
  await storage.stop()
  await test.drop()
})
const database = () => test.database

describe('a new build', () => {
  it('belongs to its maker, is private and has an address that nobody can guess', async () => {
    const user = await makeUser(database())
    const build = await createBuild(database(), user.id, newBuildSchema.parse({ name: '  Heron  pram ' }))
    expect(build).toMatchObject({ name: 'Heron pram', boat: '', units: 'inch', visibility: 'private', role: 'builder' })
    expect(build.address).toMatch(/^[0-9a-hjkmnp-tv-z]{12}$/)
    expect(await database().select().from(memberships).where(eq(memberships.buildId, build.id))).toMatchObject([{ userId: user.id, role: 'builder' }])
  })

  it('gets another address each time', () => {
    expect(new Set(Array.from({ length: 500 }, newAddress)).size).toBe(500)
  })
})

describe('the list of builds', () => {
  it('holds those one is a member of, with counts, the last one worked on first', async () => {
    const [me, other] = [await makeUser(database()), await makeUser(database())]
    const old = await makeBuild(database(), { name: 'Old' }, { builder: me })
    const busy = await makeBuild(database(), { name: 'Busy' }, { builder: other })
    await makeMember(database(), busy, me, 'crew')
    await makeBuild(database(), { name: 'Somebody else\'s', visibility: 'public' }, { builder: other })
    await makeStep(database(), busy, { status: 'done' })
    await makeStep(database(), busy)
    await makeStep(database(), busy, { status: 'done', archivedAt: new Date() })
    await makeSession(database(), busy, { date: '2026-09-05' })
    await makeSession(database(), busy, { date: '2026-09-12' })

    const list = await listBuilds(database(), me.id)
    expect(list.map(build => [build.name, build.role, build.stepCount, build.doneCount, build.sessionCount, build.lastSession])).toEqual([
      ['Busy', 'crew', 2, 1, 2, '2026-09-12'],
      ['Old', 'builder', 0, 0, 0, null],
    ])
    expect(old.id).toBe(list[1]!.id)
  })
})

describe('changing a build', () => {
  it('changes what is given and nothing else', async () => {
    const build = await makeBuild(database(), { name: 'Before', boat: 'pram' })
    expect(await changeBuild(database(), build.id, { name: 'After', visibility: 'unlisted' })).toMatchObject({ name: 'After', boat: 'pram', visibility: 'unlisted', address: build.address })
    expect(await changeBuild(database(), build.id, {})).toMatchObject({ name: 'After' })
  })
})

describe('deleting a build', () => {
  async function wholeBuild() {
    const build = await makeBuild(database(), { name: 'Heron' })
    const step = await makeStep(database(), build)
    const session = await makeSession(database(), build)
    const clip = await makeClip(database(), session)
    const [cue] = await makeCues(database(), clip, ['We glue the transom.'])
    await makeChapter(database(), clip, { stepId: step.id })
    const keys = [clip.objectKey, `${clipPrefix(clip.id)}proxy.mp4`, trackKey(cue!.trackId)]
    for (const key of keys) await storage.storage.write(key, 'bytes', 'text/plain')
    return { build, session, clip, keys }
  }

  it('keeps everything unless its name is typed', async () => {
    const { build, clip } = await wholeBuild()
    await expect(deleteBuild(database(), storage.storage, build.id, 'heron')).rejects.toMatchObject({ code: 'bad-input', message: expect.stringContaining('nothing was deleted') })
    expect(await database().select().from(chapters).where(eq(chapters.buildId, build.id))).toHaveLength(1)
    expect(await storage.storage.head(clip.objectKey)).not.toBeNull()
  })

  it('removes its rows, its files and its unfinished uploads, and nobody else\'s', async () => {
    const { build, session, keys } = await wholeBuild()
    await storage.storage.write('clips/another/original', 'bytes', 'text/plain')
    const half = await makeClip(database(), session, { state: 'uploading', contentHash: null })
    const uploadId = await storage.storage.beginUpload(half.objectKey, 'video/mp4')
    await database().insert(uploads).values({ clipId: half.id, uploadId, partSizeBytes: 8_388_608 })

    expect(await deleteBuild(database(), storage.storage, build.id, ' Heron ')).toEqual({ storageCleared: true })
    expect(await database().select().from(chapters).where(eq(chapters.buildId, build.id))).toEqual([])
    expect(await database().select().from(clips).where(eq(clips.buildId, build.id))).toEqual([])
    expect(await database().select().from(steps).where(eq(steps.buildId, build.id))).toEqual([])
    expect(await database().select().from(builds).where(eq(builds.id, build.id))).toEqual([])
    for (const key of keys) expect(await storage.storage.head(key)).toBeNull()
    expect(await storage.storage.head('clips/another/original')).not.toBeNull()
    expect(await storage.storage.listParts(half.objectKey, uploadId)).toBeNull()
  })
})
