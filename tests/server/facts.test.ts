import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { eq } from 'drizzle-orm'
import type { Build, Clip, FactRow, Session, Step, User } from '#server/database/schema'
import { facts } from '#server/database/schema'
import { requireBuild } from '#server/services/access'
import { readBench } from '#server/services/bench'
import { changeFact, listFacts } from '#server/services/facts'
import { createLiveListener, type LiveEvent } from '#server/services/live'
import { changePickup, listPickups, openPickups } from '#server/services/pickups'
import { watchStep } from '#server/services/watch'
import { factChangesSchema, pickupChangesSchema } from '#shared/schemas/facts'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeFact, makePickup, makeSession, makeStep, makeUser } from '../support/rows'

let database: TestDatabase
let builder: User, helper: User, follower: User
let build: Build, session: Session, clip: Clip, step: Step

beforeAll(async () => {
  database = await testDatabase()
  const db = database.database
  ;[builder, helper, follower] = [await makeUser(db, { name: 'Maud' }), await makeUser(db, { name: 'Ivo' }), await makeUser(db)]
  build = await makeBuild(db, { visibility: 'public' }, { builder, crew: helper, follower })
  session = await makeSession(db, build)
  clip = await makeClip(db, session)
  step = await makeStep(db, build)
})
afterAll(() => database.drop())

const asBuilder = () => ({ id: builder.id, role: 'builder' as const })
const asCrew = () => ({ id: helper.id, role: 'crew' as const })
const change = (fact: Pick<FactRow, 'id'>, hand: ReturnType<typeof asBuilder> | ReturnType<typeof asCrew>, body: unknown) => changeFact(database.database, fact.id, hand, factChangesSchema.parse(body))

describe('a fact', () => {
  it('is inked under the name of whoever does it, and is no longer the program\'s', async () => {
    const fact = await makeFact(database.database, clip)
    expect(await change(fact, asCrew(), { inking: 'inked', version: 1 })).toMatchObject({ inking: 'inked', inkedBy: { name: 'Ivo' }, proposed: false, version: 2 })
  })

  it('is mended, its words staying as said, and the change can be taken back whole', async () => {
    const fact = await makeFact(database.database, clip)
    const mended = await change(fact, asBuilder(), { inking: 'inked', value: 12.7, unit: 'mm', stepId: step.id, version: 1 })
    expect(mended).toMatchObject({ value: 12.7, stepId: step.id, said: fact.said })
    expect(await change(fact, asBuilder(), { inking: 'pencilled', value: fact.value, unit: fact.unit, stepId: null, proposed: true, dismissed: false, version: 2 })).toMatchObject({ value: fact.value, inking: 'pencilled', inkedBy: null, proposed: true })
  })

  it('that is deleted is listed no more, and comes back', async () => {
    const fact = await makeFact(database.database, clip)
    const listed = async () => (await listFacts(database.database, { sessionId: session.id })).some(one => one.id === fact.id)
    await change(fact, asBuilder(), { dismissed: true, version: 1 })
    expect(await listed()).toBe(false)
    await change(fact, asBuilder(), { dismissed: false, version: 2 })
    expect(await listed()).toBe(true)
  })

  it('is not overwritten unseen', async () => {
    const fact = await makeFact(database.database, clip)
    await change(fact, asBuilder(), { value: 1, version: 1 })
    await expect(change(fact, asCrew(), { value: 2, version: 1 })).rejects.toMatchObject({ code: 'conflict', data: { current: { value: 1, version: 2 } } })
  })

  it('that another has inked is not for crew to change', async () => {
    const fact = await makeFact(database.database, clip)
    await change(fact, asBuilder(), { inking: 'inked', version: 1 })
    await expect(change(fact, asCrew(), { value: 2, version: 2 })).rejects.toMatchObject({ code: 'forbidden' })
    expect((await database.database.select().from(facts).where(eq(facts.id, fact.id)))[0]).toMatchObject({ value: fact.value })
  })

  it('belongs to a step of its own build or to none', async () => {
    const fact = await makeFact(database.database, clip)
    const foreign = await makeStep(database.database, await makeBuild(database.database))
    await expect(change(fact, asBuilder(), { stepId: foreign.id, version: 1 })).rejects.toMatchObject({ code: 'bad-input' })
  })

  it.each([[{ version: 1 }], [{ value: Number.NaN, version: 1 }], [{ unit: 'cubit', version: 1 }], [{ inking: 'inked', proposed: true, version: 1 }], [{ value: 1 }]])('%j is refused', (body) => {
    expect(factChangesSchema.safeParse(body).success).toBe(false)
  })

  it('is for crew and builder; a follower of a public build does not find it', async () => {
    const fact = await makeFact(database.database, clip)
    for (const user of [builder, helper]) expect((await requireBuild(database.database, user.id, 'fact', fact.id, 'work')).build.id).toBe(build.id)
    for (const id of [follower.id, null]) await expect(requireBuild(database.database, id, 'fact', fact.id, 'work')).rejects.toMatchObject({ code: 'not-found' })
  })

  it('is read by the world when it is inked and said within an inked chapter', async () => {
    const shown = await makeStep(database.database, build)
    await makeChapter(database.database, clip, { stepId: shown.id, startMs: 100_000, endMs: 200_000 })
    const inside = { stepId: shown.id, inking: 'inked' as const, proposed: false }
    const kept = await makeFact(database.database, clip, { ...inside, atMs: 150_000 })
    await makeFact(database.database, clip, { ...inside, atMs: 250_000 })
    await makeFact(database.database, clip, { ...inside, atMs: 150_000, dismissed: true })
    await makeFact(database.database, clip, { stepId: shown.id, atMs: 150_000 })
    const page = await watchStep(database.database, null, build.address, shown.number, 'http://site.test')
    expect(page.facts.map(one => one.id)).toEqual([kept.id])
    expect(page.units).toBe(build.units)
  })
})

describe('a pick-up', () => {
  const close = (id: string, body: unknown) => changePickup(database.database, id, helper.id, pickupChangesSchema.parse(body))

  it('waits on the bench until it is filmed or not wanted, and can be opened again', async () => {
    const pickup = await makePickup(database.database, clip, { stepId: step.id })
    const waits = async () => (await openPickups(database.database, build.id)).some(one => one.id === pickup.id)
    expect((await openPickups(database.database, build.id)).find(one => one.id === pickup.id)).toMatchObject({ step: { number: step.number, title: step.title }, words: pickup.words })
    expect((await readBench(database.database, build, 'crew')).pickups.count).toBeGreaterThan(0)
    await close(pickup.id, { state: 'done', version: 1 })
    expect(await waits()).toBe(false)
    await close(pickup.id, { state: 'open', proposed: true, version: 2 })
    expect(await waits()).toBe(true)
    expect((await listPickups(database.database, session.id)).find(one => one.id === pickup.id)).toMatchObject({ state: 'open', proposed: true, version: 3 })
    await expect(close(pickup.id, { state: 'dismissed', version: 2 })).rejects.toMatchObject({ code: 'conflict', data: { current: { state: 'open' } } })
  })
})

describe('pages that are open', () => {
  it('hear of every change', async () => {
    const live = createLiveListener(database.url)
    await live.started
    const heard: LiveEvent[] = []
    const stop = live.watch(session.id, event => event !== 'gap' && heard.push(event))
    const fact = await makeFact(database.database, clip)
    const pickup = await makePickup(database.database, clip)
    await change(fact, asBuilder(), { inking: 'inked', version: 1 })
    await changePickup(database.database, pickup.id, builder.id, { state: 'done', version: 1 })
    await expect.poll(() => heard.map(event => [event.kind, event.id, event.by])).toEqual([['fact', fact.id, builder.id], ['pickup', pickup.id, builder.id]])
    stop()
    await live.close()
  })
})
