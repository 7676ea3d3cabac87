import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { eq } from 'drizzle-orm'
import type { Build, Clip, Part, Session, Step, User } from '#server/database/schema'
import { chapters } from '#server/database/schema'
import { changeChapters, listChapters } from '#server/services/chapters'
import { createLiveListener, type LiveEvent } from '#server/services/live'
import { chapterChangesSchema } from '#shared/schemas/chapters'
import { asPut, type Edit, join, mark, moveEdge, remove, retag, split } from '#shared/utils/chapters/edits'
import { asChanges, type Done, doneWith, restamp, takeBack, touchedBy } from '#shared/utils/chapters/history'
import { cuttingBack, overTheirs } from '#shared/utils/chapters/conflicts'
import type { ChapterView } from '#shared/types/session'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makeChapter, makeClip, makeMember, makePart, makeSession, makeStep, makeUser } from '../support/rows'

let database: TestDatabase
let builder: User, ivo: User, helper: User
let build: Build, session: Session, clip: Clip, second: Clip, step: Step, other: Step, part: Part

beforeAll(async () => {
  database = await testDatabase()
  const db = database.database
  ;[builder, ivo, helper] = [await makeUser(db, { name: 'Maud' }), await makeUser(db, { name: 'Ivo' }), await makeUser(db, { name: 'Wren' })]
  build = await makeBuild(db, {}, { builder, crew: helper })
  await makeMember(db, build, ivo, 'builder')
  session = await makeSession(db, build)
  clip = await makeClip(db, session)
  second = await makeClip(db, session)
  part = await makePart(db, build)
  step = await makeStep(db, build, {}, [part])
  other = await makeStep(db, build)
})
afterAll(() => database.drop())
beforeEach(async () => {
  await database.database.delete(chapters)
})

const newId = () => crypto.randomUUID()
const list = () => listChapters(database.database, { sessionId: session.id })
/** As the page's request travels: through the schema, then the service. */
const send = (edit: Edit, user = builder) => changeChapters(database.database, session.id, { id: user.id, role: user === helper ? 'crew' : 'builder' }, chapterChangesSchema.parse(asChanges(edit)))
const tag = () => ({ stepId: step.id, operation: 'glue' as const, partIds: [part.id] })
const spans = (rows: ChapterView[]) => rows.filter(row => row.clipId === clip.id).map(row => [row.startMs, row.endMs])
async function marked(startMs: number, endMs: number, user = builder): Promise<ChapterView> {
  const edit = mark(await list(), clip.id, startMs, endMs, tag(), newId)
  return (await send(edit, user)).chapters.find(one => one.id === edit.put.at(-1)!.id)!
}

describe('one person', () => {
  it('marks a chapter with its parts, inked and under version 1', async () => {
    expect(await marked(1000, 5000)).toMatchObject({ startMs: 1000, endMs: 5000, stepId: step.id, operation: 'glue', partIds: [part.id], inking: 'inked', confidence: null, version: 1, updatedBy: 'Maud' })
  })

  it('marks over a proposal, which gives way on both sides', async () => {
    await makeChapter(database.database, clip, { startMs: 0, endMs: 20_000, inking: 'pencilled', confidence: 0.5 })
    await marked(5000, 9000)
    const rows = await list()
    expect(spans(rows)).toEqual([[0, 5000], [5000, 9000], [9000, 20_000]])
    expect(rows.map(row => row.inking)).toEqual(['pencilled', 'inked', 'pencilled'])
    expect(rows[2]!.confidence).toBeCloseTo(0.5)
  })

  it('moves the edge that two chapters share in one go', async () => {
    await marked(0, 5000)
    await marked(5000, 9000)
    const [first] = await list()
    await send(moveEdge(await list(), first!, 'end', 7000, 600_000)!)
    expect(spans(await list())).toEqual([[0, 7000], [7000, 9000]])
  })

  it('splits, joins, retags and deletes, and takes each back to where it was', async () => {
    await marked(0, 5000)
    await marked(5000, 9000)
    const content = (rows: ChapterView[]) => rows.map(({ version: _v, ...rest }) => rest)
    const start = content(await list())
    let done: Done[] = []
    const run = async (edit: Edit) => {
      const before = touchedBy(edit, await list())
      const result = doneWith(edit, before, await send(edit))
      done.push(result)
      return result
    }
    await run(split((await list())[0]!, 2000, newId)!)
    await run(join(await list(), (await list())[1]!)!)
    await run(retag((await list())[0]!, { stepId: other.id, operation: 'cut', note: 'scarf first' }))
    await run(remove((await list())[1]!))
    expect(spans(await list())).toEqual([[0, 2000]])
    while (done.length) {
      const last = done.pop()!
      const rest = done
      const result = await run(takeBack(last, await list())!)
      done = restamp(rest.filter(one => one !== result), last, result)
    }
    expect(content(await list())).toEqual(start)
  })

  it('is refused times beyond the clip, with nothing changed', async () => {
    await expect(send(mark([], clip.id, 0, 600_001, tag(), newId))).rejects.toMatchObject({ code: 'bad-input', data: { issues: [{ path: 'endMs' }] } })
    expect(await list()).toEqual([])
  })

  it('is refused what breaks the rules before anything is asked of the database', () => {
    const put = { ...mark([], clip.id, 0, 1000, tag(), newId).put[0]! }
    const issues = (body: unknown) => chapterChangesSchema.safeParse(body).error?.issues.map(issue => issue.message)
    expect(issues({ put: [{ ...put, endMs: 0 }] })).toContain('The out point must come after the in point')
    expect(issues({ put: [{ ...put, startMs: 0.5 }] })).toContain('Times are whole milliseconds')
    expect(issues({ put: [{ ...put, operation: 'none' }] })).toContain('A stretch that shows no work cannot belong to a step')
    expect(issues({ put: [put, put] })).toContain('A chapter is named twice')
    expect(issues({})).toContain('There is nothing to change')
  })
})

describe('things of another build', () => {
  it('cannot be tied to a chapter, nor can its clips', async () => {
    const foreign = await makeBuild(database.database, {}, { builder })
    const foreignClip = await makeClip(database.database, await makeSession(database.database, foreign))
    const foreignStep = await makeStep(database.database, foreign)
    const foreignPart = await makePart(database.database, foreign)
    const base = mark([], clip.id, 0, 1000, tag(), newId)
    for (const wrong of [{ clipId: foreignClip.id }, { stepId: foreignStep.id }, { partIds: [foreignPart.id] }]) {
      await expect(send({ ...base, put: [{ ...base.put[0]!, id: newId(), ...wrong }] })).rejects.toMatchObject({ code: 'bad-input' })
    }
    expect(await list()).toEqual([])
  })

  it('cannot be changed through this session', async () => {
    const foreign = await makeBuild(database.database, {}, { builder })
    const foreignSession = await makeSession(database.database, foreign)
    const theirs = await makeChapter(database.database, await makeClip(database.database, foreignSession))
    const [view] = await listChapters(database.database, { ids: [theirs.id] })
    await expect(send(remove(view!))).rejects.toMatchObject({ code: 'conflict' })
    await expect(send({ label: '', put: [{ ...mark([], clip.id, 0, 1000, tag(), newId).put[0]!, id: theirs.id, version: 1 }], remove: [] })).rejects.toMatchObject({ code: 'conflict' })
    expect(await listChapters(database.database, { ids: [theirs.id] })).toEqual([view])
  })
})

describe('two people', () => {
  it('do not overwrite one another: the slower is told what now stands', async () => {
    const seen = await marked(0, 5000)
    await send(retag(seen, { operation: 'fasten' }), ivo)
    const mine = retag(seen, { operation: 'paint' })
    const conflict = await send(mine).then(() => null, error => error)
    expect(conflict).toMatchObject({ code: 'conflict', data: { reason: 'changed', gone: [], current: [{ id: seen.id, operation: 'fasten', version: 2, updatedBy: 'Ivo' }] } })
    expect(conflict.message).toContain('Ivo')
    expect((await list())[0]!.operation).toBe('fasten')
    await send(overTheirs(mine, conflict.data))
    expect((await list())[0]).toMatchObject({ operation: 'paint', version: 3, updatedBy: 'Maud' })
  })

  it('learn that a chapter is gone, and may mark it again', async () => {
    const seen = await marked(0, 5000)
    await send(remove(seen), ivo)
    const mine = retag(seen, { operation: 'paint' })
    const conflict = await send(mine).then(() => null, error => error)
    expect(conflict.data).toMatchObject({ reason: 'changed', current: [], gone: [seen.id] })
    await send(overTheirs(mine, conflict.data))
    expect(await list()).toMatchObject([{ id: seen.id, operation: 'paint', version: 1 }])
  })

  it('who mark the same stretch unseen: one is told what is in the way, and may cut it back', async () => {
    const mine = mark(await list(), clip.id, 2000, 6000, tag(), newId)
    await marked(4000, 9000, ivo)
    const conflict = await send(mine).then(() => null, error => error)
    expect(conflict).toMatchObject({ code: 'conflict', data: { reason: 'overlap', with: [{ startMs: 4000, endMs: 9000, updatedBy: 'Ivo' }] } })
    expect(spans(await list())).toEqual([[4000, 9000]])
    await send(cuttingBack(mine, conflict.data.with, newId))
    expect(spans(await list())).toEqual([[2000, 6000], [6000, 9000]])
  })

  it('an edit of several chapters is whole or not at all', async () => {
    await marked(0, 5000)
    await marked(5000, 9000)
    const [first, next] = await list()
    const joined = join([first!, next!], first!)!
    await send(retag(next!, { note: 'Ivo was here' }), ivo)
    await expect(send(joined)).rejects.toMatchObject({ data: { reason: 'changed' } })
    expect(spans(await list())).toEqual([[0, 5000], [5000, 9000]])
  })

  it.each([1, 2, 3])('at the very same moment: one of two wins and never both (%i)', async () => {
    const seen = await marked(0, 5000)
    const results = await Promise.allSettled([send(retag(seen, { operation: 'paint' })), send(retag(seen, { operation: 'fasten' }), ivo)])
    expect(results.filter(result => result.status === 'fulfilled')).toHaveLength(1)
    const [row] = await list()
    expect(row).toMatchObject({ version: 2, operation: results[0]!.status === 'fulfilled' ? 'paint' : 'fasten' })
  })

  it('at the very same moment over the same bare stretch: never both', async () => {
    const results = await Promise.allSettled([send(mark([], clip.id, 0, 5000, tag(), newId)), send(mark([], clip.id, 4000, 9000, tag(), newId), ivo)])
    expect(results.filter(result => result.status === 'fulfilled')).toHaveLength(1)
    expect(results.find(result => result.status === 'rejected')).toMatchObject({ reason: { code: 'conflict', data: { reason: 'overlap' } } })
    expect(await list()).toHaveLength(1)
  })

  it('may mark the same time of two cameras', async () => {
    await send(mark([], clip.id, 0, 5000, tag(), newId))
    await send(mark([], second.id, 0, 5000, tag(), newId), ivo)
    expect(await list()).toHaveLength(2)
  })

  it('hear of each other’s chapters when they are kept, and not of what was refused', async () => {
    const live = createLiveListener(database.url)
    await live.started
    const heard: LiveEvent[] = []
    const arrived = new Promise<void>((resolve) => {
      live.watch(session.id, (event) => {
        if (event === 'gap') return
        heard.push(event)
        if (heard.some(one => one.by === builder.id)) resolve()
      })
    })
    try {
      const seen = await marked(0, 5000, ivo)
      await expect(send(retag({ ...seen, version: 9 }, { operation: 'cut' }))).rejects.toMatchObject({ code: 'conflict' })
      await send(remove(seen))
      await arrived
      expect(heard.map(({ kind, id, by }) => ({ kind, id, by }))).toEqual([{ kind: 'chapter', id: seen.id, by: ivo.id }, { kind: 'chapter', id: seen.id, by: builder.id }])
    }
    finally {
      await live.close()
    }
  })
})

describe('crew', () => {
  const pencil = (values = {}) => makeChapter(database.database, clip, { startMs: 20_000, endMs: 30_000, inking: 'pencilled', confidence: 0.5, ...values })
  const refused = { code: 'forbidden', message: expect.stringContaining('Maud has inked this chapter') }

  it('ink, retag, cut and delete what is pencilled', async () => {
    await pencil()
    await pencil({ startMs: 30_000, endMs: 40_000 })
    const [first, next] = await list()
    await send(retag(first!, { operation: 'paint' }), helper)
    await send(mark(await list(), clip.id, 32_000, 34_000, tag(), newId), helper)
    await send(remove((await list()).find(one => one.id === next!.id)!), helper)
    expect(spans(await list())).toEqual([[20_000, 30_000], [32_000, 34_000], [34_000, 40_000]])
  })

  it('change and delete what they inked themselves, and take it back', async () => {
    const own = await marked(0, 5000, helper)
    expect(own.inkedBy).toEqual({ id: helper.id, name: 'Wren' })
    const edit = remove(own)
    const done = doneWith(edit, touchedBy(edit, await list()), await send(edit, helper))
    await send(takeBack(done, await list())!, helper)
    expect(await list()).toMatchObject([{ id: own.id, startMs: 0, endMs: 5000, inkedBy: { id: helper.id } }])
  })

  it('keep their ink when the builder trims it, and lose it when it is made pencil again', async () => {
    const own = await marked(0, 5000, helper)
    await send(moveEdge(await list(), own, 'end', 4000, 600_000)!)
    expect((await list())[0]).toMatchObject({ updatedBy: 'Maud', inkedBy: { name: 'Wren' } })
    await send(retag((await list())[0]!, { operation: 'cut' }), helper)
    const [now] = await list()
    await send({ label: '', put: [{ ...asPut(now!), inking: 'pencilled', confidence: 0.5 }], remove: [] })
    expect((await list())[0]!.inkedBy).toBeNull()
  })

  it('do not change, cut back, pencil or delete what another person has inked; nothing of such an edit is kept', async () => {
    const theirs = await marked(0, 5000)
    await pencil()
    const before = await list()
    const edits = [
      retag(theirs, { note: 'mine now' }), remove(theirs), split(theirs, 2000, newId)!, join(before, theirs)!, moveEdge(before, theirs, 'end', 6000, 600_000)!,
      mark(before, clip.id, 4000, 25_000, tag(), newId), { label: '', put: [{ ...asPut(theirs), inking: 'pencilled' as const, confidence: 0.1 }], remove: [] },
    ]
    for (const edit of edits) await expect(send(edit, helper)).rejects.toMatchObject(refused)
    expect(await list()).toEqual(before)
  })

  it('are told that a proposal was inked meanwhile, rather than offered to put theirs over it', async () => {
    const row = await pencil()
    const [seen] = await list()
    await send(retag(seen!, { operation: 'paint' }))
    await expect(send(retag(seen!, { operation: 'cut' }), helper)).rejects.toMatchObject(refused)
    expect((await list()).find(one => one.id === row.id)).toMatchObject({ operation: 'paint' })
  })
})

describe('the database itself', () => {
  it('lets no two chapters of a clip overlap, whoever writes', async () => {
    await marked(0, 5000)
    await expect(makeChapter(database.database, clip, { startMs: 4999, endMs: 6000 })).rejects.toThrow()
    await makeChapter(database.database, clip, { startMs: 5000, endMs: 6000 })
    expect(await database.database.select().from(chapters).where(eq(chapters.clipId, clip.id))).toHaveLength(2)
  })
})
