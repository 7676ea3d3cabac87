import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Build, Clip, Part, Step, User } from '#server/database/schema'
import { builds, chapters, clips, memberships } from '#server/database/schema'
import { refreshPassages } from '#server/services/search/passages'
import { readings } from '#server/services/search/finding'
import { search } from '#server/services/search/search'
import { understand } from '#server/indexing/search/understand'
import { searchSchema } from '#shared/schemas/search'
import { eq } from 'drizzle-orm'
import type { SearchAnswer } from '#shared/types/search'
import { type TestDatabase, testDatabase } from '../../support/database'
import { makeBuild, makeChapter, makeClip, makeCues, makePart, makeSession, makeStep, makeUser } from '../../support/rows'

let database: TestDatabase
let builder: User, crew: User, follower: User, stranger: User
let build: Build, clip: Clip, bow: Part, stern: Part, log: Part, glueStep: Step, logStep: Step

const LINES = [
  'Morning all and welcome back to the shed',
  'the kettle is on',
  'so here is the bow transom and its cheeks',
  'I mix the thickened epoxy until it is like peanut butter',
  'and spread it on the face of the bow transom',
  'clamp it and leave it overnight',
  'that is the squeeze out wiped off',
  'now over to the chine log',
  'I plane the bevel until a straight edge lies flat',
  'and the shavings go in the stove',
]

beforeAll(async () => {
  database = await testDatabase()
  const db = database.database
  ;[builder, crew, follower, stranger] = [await makeUser(db), await makeUser(db), await makeUser(db), await makeUser(db)]
  build = await makeBuild(db, { name: 'Pram', visibility: 'public' }, { builder, crew, follower })
  bow = await makePart(db, build, { name: 'bow transom', aliases: ['front transom'] })
  stern = await makePart(db, build, { name: 'stern transom', aliases: ['back board'] })
  log = await makePart(db, build, { name: 'chine log', aliases: ['chine'] })
  glueStep = await makeStep(db, build, { title: 'Glue the cheeks to the bow transom', stage: 'Transoms' }, [bow])
  logStep = await makeStep(db, build, { title: 'Bevel the chine logs', stage: 'Chines' }, [log])
  const session = await makeSession(db, build, { date: '2026-09-05' })
  clip = await makeClip(db, session)
  await makeCues(db, clip, LINES)
  await makeChapter(db, clip, { startMs: 8_000, endMs: 28_000, stepId: glueStep.id, operation: 'glue' }, [bow])
  await makeChapter(db, clip, { startMs: 28_000, endMs: 40_000, stepId: logStep.id, operation: 'shape', inking: 'pencilled', confidence: 0.7 }, [log])
  await refreshPassages(db, clip.id)
})
afterAll(() => database.drop())

const ask = (userId: string | null, query: Record<string, unknown>) => search(database.database, userId, searchSchema.parse(query))
const moments = (answer: SearchAnswer) => answer.groups.flatMap(group => group.moments)

describe('a question about one build', () => {
  it('is read as part and operation, and starts where the answer starts', async () => {
    const answer = await ask(builder.id, { q: 'how was the bow transom glued', build: build.id })
    expect(answer.understood.summary).toBe('part: bow transom · operation: glue')
    const [first] = moments(answer)
    expect(first).toMatchObject({ clip: { id: clip.id }, chapter: { inking: 'inked', operation: 'glue', parts: ['bow transom'] } })
    expect(first!.atMs).toBeGreaterThanOrEqual(8_000)
    expect(first!.atMs).toBeLessThanOrEqual(16_000)
    expect(answer.groups[0]!.step).toMatchObject({ number: glueStep.number, stage: 'Transoms' })
    const { text, marks } = first!.words
    expect(marks.map(([from, to]) => text.slice(from, to))).toContain('epoxy')
  })

  it('takes the last word of a name for every part that ends so', async () => {
    const answer = await ask(builder.id, { q: 'transom glued', build: build.id })
    expect(answer.understood.parts.map(part => part.id).sort()).toEqual([bow.id, stern.id].sort())
    expect(moments(answer)[0]!.chapter!.operation).toBe('glue')
  })

  it.each(['epoxy', 'adhesive', 'bonded', 'glued up', 'gluing', 'stuck'])('finds glueing by “%s”', async (word) => {
    const [first] = moments(await ask(builder.id, { q: word, build: build.id }))
    expect(first?.chapter?.operation).toBe('glue')
  })

  it.each([['transon glue', 'transom'], ['epoxxy', 'epoxy'], ['shavigns', 'shavings'], ['peanit butter', 'peanut']])('forgives “%s”', async (typed, read) => {
    const answer = await ask(builder.id, { q: typed, build: build.id })
    expect(answer.understood.corrections.map(correction => correction.read)).toContain(read)
    expect(moments(answer).length).toBeGreaterThan(0)
  })

  it('reads part names by alias', async () => {
    const answer = await ask(builder.id, { q: 'front transom', build: build.id })
    expect(answer.understood.parts).toEqual([{ id: bow.id, name: 'bow transom' }])
    expect(moments(answer)[0]!.chapter!.parts).toEqual(['bow transom'])
  })

  it('follows a part that is renamed without anything being made again', async () => {
    await database.pool.query('update parts set name = $1 where id = $2', ['prow board', bow.id])
    try {
      const [first] = moments(await ask(builder.id, { q: 'prow board glued', build: build.id }))
      expect(first?.chapter?.parts).toEqual(['prow board'])
    }
    finally {
      await database.pool.query('update parts set name = $1 where id = $2', ['bow transom', bow.id])
    }
  })

  it('narrows by step, part, operation, day and session', async () => {
    expect(moments(await ask(builder.id, { q: 'epoxy', build: build.id, step: glueStep.id })).length).toBe(1)
    expect(moments(await ask(builder.id, { q: 'epoxy', build: build.id, step: logStep.id })).length).toBe(0)
    expect(moments(await ask(builder.id, { q: '', build: build.id, part: log.id })).map(moment => moment.chapter!.operation)).toEqual(['shape'])
    expect(moments(await ask(builder.id, { q: 'transom', build: build.id, operation: 'paint' })).length).toBe(0)
    expect(moments(await ask(builder.id, { q: 'epoxy', build: build.id, from: '2026-09-05', to: '2026-09-05' })).length).toBeGreaterThan(0)
    expect(moments(await ask(builder.id, { q: 'epoxy', build: build.id, from: '2026-09-06' })).length).toBe(0)
    const [one] = moments(await ask(builder.id, { q: 'epoxy', build: build.id }))
    expect(moments(await ask(builder.id, { q: 'epoxy', build: build.id, session: one!.session!.id })).length).toBeGreaterThan(0)
    expect(moments(await ask(builder.id, { q: 'epoxy', build: build.id, session: '00000000-0000-4000-8000-000000000000' }))).toEqual([])
  })

  it('says what to try when nothing is found', async () => {
    const answer = await ask(builder.id, { q: 'epoxy', build: build.id, operation: 'paint' })
    expect(answer.groups).toEqual([])
    expect(answer.instead).toMatchObject({ drop: ['operation'], examples: ['how was the bow transom glued'] })
    const unheard = await ask(builder.id, { q: 'kettledrum', build: build.id })
    expect(unheard.understood.unheard).toEqual(['kettledrum'])
    expect(unheard.instead?.examples.length).toBe(1)
  })

  it.each(['\'":*&|!()', '\\\'; drop table cues;--', 'glue & !epoxy', '<->', '%_%', '\u0000', '🛶'.repeat(60), '’', '  '])('takes %j as words only', async (q) => {
    const answer = await ask(builder.id, { q: `${q} epoxy`.slice(0, 300), build: build.id })
    expect(answer.question.length).toBeGreaterThan(0)
    await expect(ask(builder.id, { q: q.slice(0, 300), build: build.id })).resolves.toBeTruthy()
  })
})

describe('who sees what', () => {
  const found = async (userId: string | null, query: Record<string, unknown>) => moments(await ask(userId, query))

  it('shows pencilled chapters and bare footage to builder and crew only', async () => {
    for (const user of [builder, crew]) {
      expect((await found(user.id, { q: 'shavings', build: build.id })).length).toBe(1)
      expect((await found(user.id, { q: 'kettle', build: build.id })).length).toBe(1)
      expect((await found(user.id, { q: 'shavings' })).length).toBe(1)
    }
    for (const userId of [follower.id, stranger.id, null]) {
      for (const scope of [{ build: build.id }, {}]) {
        expect(await found(userId, { q: 'shavings', ...scope })).toEqual([])
        expect(await found(userId, { q: 'kettle', ...scope })).toEqual([])
        const [glue] = await found(userId, { q: 'epoxy', ...scope })
        expect(glue).toMatchObject({ session: null, chapter: { inking: 'inked' } })
        expect(glue!.link).toMatch(new RegExp(`^/watch/${build.address}/moments/${clip.id}\\?at=`))
      }
    }
    expect((await found(crew.id, { q: 'epoxy' }))[0]!.link).toContain(`/builds/${build.id}/sessions/`)
  })

  it('searches unlisted builds only when named, and private ones for members only', async () => {
    await database.database.update(builds).set({ visibility: 'unlisted' }).where(eq(builds.id, build.id))
    expect(await found(null, { q: 'epoxy' })).toEqual([])
    expect(await found(stranger.id, { q: 'epoxy' })).toEqual([])
    expect((await found(follower.id, { q: 'epoxy' })).length).toBe(1)
    expect((await found(null, { q: 'epoxy', build: build.id })).length).toBe(1)
    await database.database.update(builds).set({ visibility: 'private' }).where(eq(builds.id, build.id))
    for (const userId of [null, stranger.id]) {
      expect(await found(userId, { q: 'epoxy' })).toEqual([])
      await expect(ask(userId, { q: 'epoxy', build: build.id })).rejects.toMatchObject({ code: 'not-found' })
    }
    expect((await found(follower.id, { q: 'epoxy', build: build.id })).length).toBe(1)
    await database.database.update(builds).set({ visibility: 'public' }).where(eq(builds.id, build.id))
  })

  it('goes by chapters as they stand, even before passages are made again', async () => {
    const [inked] = await database.database.select().from(chapters).where(eq(chapters.operation, 'glue'))
    await database.database.update(chapters).set({ inking: 'pencilled' }).where(eq(chapters.id, inked!.id))
    expect(await found(null, { q: 'epoxy', build: build.id })).toEqual([])
    await database.database.update(chapters).set({ inking: 'inked' }).where(eq(chapters.id, inked!.id))
  })

  it('forgets a membership at once', async () => {
    await database.database.delete(memberships).where(eq(memberships.userId, crew.id))
    expect(await found(crew.id, { q: 'kettle' })).toEqual([])
    await database.database.insert(memberships).values({ buildId: build.id, userId: crew.id, role: 'crew' })
  })
})

describe('many moments', () => {
  it('come page by page without gap or double, also while new ones arrive', async () => {
    const db = database.database
    const big = await makeBuild(db, { name: 'Skiff' }, { builder })
    const session = await makeSession(db, big)
    const add = async () => {
      const one = await makeClip(db, session)
      await makeCues(db, one, Array.from({ length: 24 }, (_, i) => ({ startMs: i * 40_000, endMs: i * 40_000 + 3000, text: `varnish on the oar number ${i}` })))
      await refreshPassages(db, one.id)
    }
    await add()
    await add()
    const seen: string[] = []
    let after: string | undefined
    for (let page = 0; page < 10; page++) {
      const answer = await ask(builder.id, { q: 'varnish', build: big.id, limit: 7, after })
      seen.push(...moments(answer).map(moment => moment.id))
      if (page === 1) await add()
      if (!answer.next) break
      after = answer.next
    }
    expect(new Set(seen).size).toBe(seen.length)
    expect(seen.length).toBeGreaterThanOrEqual(48)
    await expect(ask(builder.id, { q: 'varnish', build: big.id, after: 'nonsense' })).rejects.toMatchObject({ code: 'bad-input' })
  })

  it('goes when the clip goes, counts and all', async () => {
    const db = database.database
    const small = await makeBuild(db, {}, { builder })
    const one = await makeClip(db, await makeSession(db, small))
    await makeCues(db, one, ['a sternpost of greenheart'])
    await refreshPassages(db, one.id)
    expect(moments(await ask(builder.id, { q: 'greenheart', build: small.id })).length).toBe(1)
    await db.delete(clips).where(eq(clips.id, one.id))
    const { rows } = await database.pool.query('select sum(passages)::int as n from search_words where build_id = $1', [small.id])
    expect(rows[0].n).toBe(0)
    await db.delete(builds).where(eq(builds.id, small.id))
  })
})

describe('readings of a question', () => {
  const plan = { steps: [], parts: [] }
  const frequencies = { passages: 100_000, of: new Map([['glue', 30_000], ['epoxi', 20_000], ['screw', 40_000], ['drill', 30_000], ['sapel', 12]]) }
  const texts = (q: string, filters = {}, seer: Parameters<typeof readings>[3] = { inkedOnly: false }) => readings(understand(q, plan), frequencies, filters, seer).map(reading => reading.text)

  it('never end in the filters alone, which would find anything', () => {
    for (const q of ['glue screw drill', 'glue sapele screw', 'sapele', 'nobodysaysthis', 'glue']) {
      for (const text of texts(q, { buildId: 'b1' })) expect(text).toMatch(/^'b:b1' & ./)
    }
  })
  it('ask for ink where only ink may be seen', () => {
    for (const text of [...texts('glue', {}, { inkedOnly: true }), ...texts('glue', {}, { userId: null })]) expect(text).toContain('\'i:1\'')
    for (const text of texts('glue', {}, { userId: 'somebody' })) expect(text).not.toContain('\'i:1\'')
  })
  it('are few, the strictest first and the rarest word last alone', () => {
    const list = texts('sapele glue screw drill')
    expect(list.length).toBeLessThanOrEqual(6)
    expect(list).toContain('(\'sapel\' | \'t:sapel\')')
  })
  it('are none for nothing', () => expect(texts('')).toEqual([]))
})
