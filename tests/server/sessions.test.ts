import { eq, sql } from 'drizzle-orm'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { type Build, clips, sessions, type Session, type User } from '#server/database/schema'
import { updateClip } from '#server/services/clips'
import { requireMedia } from '#server/services/media'
import { createSession, deleteSession, listSessions, readSession, updateSession } from '#server/services/sessions'
import { newSessionSchema, sessionChangesSchema } from '#shared/schemas/sessions'
import { testDatabase, type TestDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeCues, makeMember, makeSession, makeStep, makeUser } from '../support/rows'

let handle: TestDatabase
let builder: User
let build: Build

beforeAll(async () => {
  handle = await testDatabase()
})
afterAll(() => handle.drop())
beforeEach(async () => {
  builder = await makeUser(handle.database)
  build = await makeBuild(handle.database, { units: 'inch' }, { builder })
})

const detail = (session: Pick<Session, 'id'>) => readSession(handle.database, session.id, { build, role: 'builder' })

describe('a session', () => {
  it('is written down with its steps, read, changed in part and listed', async () => {
    const [one, two] = [await makeStep(handle.database, build), await makeStep(handle.database, build)]
    const { id } = await createSession(handle.database, build.id, newSessionSchema.parse({ date: '2026-09-05', place: ' Shop ', temperatureC: 17.5, humidityPercent: 60, stepIds: [two.id, one.id, one.id] }))
    expect(await detail({ id })).toMatchObject({ date: '2026-09-05', place: 'Shop', temperatureC: 17.5, humidityPercent: 60, stepIds: [one.id, two.id], clips: [], tracks: [], build: { units: 'inch' } })
    await updateSession(handle.database, id, builder.id, { notes: 'Glue was slow.', stepIds: [two.id], temperatureC: null })
    expect(await detail({ id })).toMatchObject({ place: 'Shop', notes: 'Glue was slow.', stepIds: [two.id], temperatureC: null })
  })

  it('takes no step of another build, and then changes nothing', async () => {
    const foreign = await makeStep(handle.database, await makeBuild(handle.database))
    const session = await makeSession(handle.database, build, { notes: 'before' })
    await expect(updateSession(handle.database, session.id, builder.id, { notes: 'after', stepIds: [foreign.id] })).rejects.toMatchObject({ code: 'bad-input' })
    expect((await detail(session)).notes).toBe('before')
  })

  it.each([[{ date: '2026-02-30' }], [{ date: 'yesterday' }], [{ date: '2026-09-05', humidityPercent: 101 }], [{ date: '2026-09-05', temperatureC: 200 }], [{ date: '2026-09-05', stepIds: ['x'] }], [{}]])('refuses %j', (input) => {
    expect(newSessionSchema.safeParse(input).success).toBe(false)
  })

  it('a change that names nothing changes nothing', async () => {
    const session = await makeSession(handle.database, build, { notes: 'kept' })
    await updateSession(handle.database, session.id, builder.id, sessionChangesSchema.parse({ unknown: 1 }))
    expect((await detail(session)).notes).toBe('kept')
  })
})

it('the list tells what each session holds, newest day first', async () => {
  const step = await makeStep(handle.database, build, { number: 7 })
  const older = await makeSession(handle.database, build, { date: '2026-09-05' })
  const newer = await makeSession(handle.database, build, { date: '2026-09-12' })
  const clip = await makeClip(handle.database, older, { durationMs: 100_000 })
  await makeClip(handle.database, older, { state: 'failed', durationMs: null })
  await makeClip(handle.database, older, { state: 'uploading', durationMs: null, contentHash: null })
  await makeChapter(handle.database, clip, { startMs: 0, endMs: 20_000 })
  await makeChapter(handle.database, clip, { startMs: 20_000, endMs: 50_000, inking: 'pencilled' })
  await makeCues(handle.database, clip, ['a', 'b'], { clipId: clip.id })
  await updateSession(handle.database, older.id, builder.id, { stepIds: [step.id] })
  const list = await listSessions(handle.database, build.id)
  expect(list.map(row => row.id)).toEqual([newer.id, older.id])
  expect(list[1]).toMatchObject({ date: '2026-09-05', clipCount: 3, footageMs: 100_000, chapteredMs: 50_000, inkedMs: 20_000, uploading: 1, working: 0, failed: 1, captionsWaiting: 0, stepNumbers: [7] })
  expect(list[0]).toMatchObject({ clipCount: 0, footageMs: 0, chapteredMs: 0, stepNumbers: [] })
  expect((await detail(older)).tracks).toMatchObject([{ clipId: clip.id, cueCount: 2, embedded: false, read: true }])
})

it('deleting a session leaves jobs for everything it had in the storage', async () => {
  const session = await makeSession(handle.database, build)
  const clip = await makeClip(handle.database, session)
  await makeCues(handle.database, clip, ['a'])
  await deleteSession(handle.database, session.id, builder.id)
  expect(await handle.database.select().from(sessions).where(eq(sessions.id, session.id))).toEqual([])
  expect(await handle.database.select().from(clips).where(eq(clips.id, clip.id))).toEqual([])
  const { rows } = await handle.database.execute<{ key: string }>(sql`select key from graphile_worker.jobs where key like 'remove-objects:%'`)
  expect(rows.map(row => row.key)).toContain(`remove-objects:clips/${clip.id}/`)
  expect(rows.some(row => row.key.startsWith('remove-objects:captions/'))).toBe(true)
})

describe('placing clips', () => {
  const probe = (recordedAt: string) => ({ recordedAt, proxyReasons: [], warnings: [], subtitles: [] }) as never
  it('a nudge moves one clip, null gives it back to the program, a time by hand moves it too', async () => {
    const session = await makeSession(handle.database, build)
    const a = await makeClip(handle.database, session, { probe: probe('2026-09-05T08:00:00Z') })
    const b = await makeClip(handle.database, session, { probe: probe('2026-09-05T08:10:00Z') })
    const offsets = async () => Object.fromEntries((await detail(session)).clips.map(clip => [clip.id, clip.offsetMs]))
    await updateClip(handle.database, b.id, builder.id, { offsetMs: 600_400 })
    expect(await offsets()).toEqual({ [a.id]: 0, [b.id]: 600_400 })
    expect((await detail(session)).clips.find(clip => clip.id === b.id)).toMatchObject({ offsetByHand: true })
    await updateClip(handle.database, b.id, builder.id, { offsetMs: null })
    expect(await offsets()).toEqual({ [a.id]: 0, [b.id]: 600_000 })
    await updateClip(handle.database, b.id, builder.id, { recordedAt: '2026-09-05T07:59:00Z', camera: 'Overhead' })
    expect(await offsets()).toEqual({ [b.id]: 0, [a.id]: 60_000 })
    expect((await detail(session)).clips[0]).toMatchObject({ recordedAtSource: 'hand', camera: 'Overhead' })
    await updateClip(handle.database, b.id, builder.id, { recordedAt: null })
    expect(await offsets()).toEqual({ [a.id]: 0, [b.id]: 600_000 })
  })
})

describe('who may see a clip’s pictures and sound', () => {
  it('crew and builder always; others only what has an inked chapter in a build they may watch', async () => {
    const crew = await makeUser(handle.database)
    const follower = await makeUser(handle.database)
    const stranger = await makeUser(handle.database)
    await makeMember(handle.database, build, crew, 'crew')
    await makeMember(handle.database, build, follower, 'follower')
    const clip = await makeClip(handle.database, await makeSession(handle.database, build))
    const allowed = async (userId: string | null) => requireMedia(handle.database, userId, clip.id).then(() => true, error => error.code)
    expect(await allowed(builder.id)).toBe(true)
    expect(await allowed(crew.id)).toBe(true)
    expect(await allowed(follower.id)).toBe('not-found')
    await makeChapter(handle.database, clip, { inking: 'pencilled' })
    expect(await allowed(follower.id)).toBe('not-found')
    await makeChapter(handle.database, clip, { startMs: 60_000, endMs: 70_000, inking: 'inked' })
    expect(await allowed(follower.id)).toBe(true)
    expect(await allowed(stranger.id)).toBe('not-found')
    expect(await allowed(null)).toBe('not-found')
    await handle.database.execute(sql`update builds set visibility = 'unlisted' where id = ${build.id}`)
    expect(await allowed(null)).toBe(true)
  })
})
