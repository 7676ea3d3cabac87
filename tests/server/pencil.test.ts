import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { and, eq } from 'drizzle-orm'
import type { Build, Clip, Session, Step, User } from '#server/database/schema'
import { chapters, dismissals, facts, passages, pencillings, pickups, sessionSteps } from '#server/database/schema'
import { changeChapters, listChapters } from '#server/services/chapters'
import { importTable } from '#server/services/planImport'
import { pencilSession } from '#server/services/pencil/pencilSession'
import { readPlanView } from '#server/services/plan'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import { chapterChangesSchema } from '#shared/schemas/chapters'
import { type Edit, ink, mark, remove, retag, split } from '#shared/utils/chapters/edits'
import { asChanges, doneWith, merge, takeBack, touchedBy } from '#shared/utils/chapters/history'
import type { ChapterView } from '#shared/types/session'
import { demoBuild } from '../../workers/demo/index'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makeClip, makeCues, makeSession, makeUser } from '../support/rows'

/** The demo's words over clips without footage: what the program makes of them is its own business, not this test's. */
let database: TestDatabase
let builder: User, helper: User
let build: Build, session: Session, clips: Clip[], steps: Pick<Step, 'id' | 'number'>[]

beforeAll(async () => {
  database = await testDatabase()
  const db = database.database
  ;[builder, helper] = [await makeUser(db, { name: 'Maud' }), await makeUser(db, { name: 'Ivo' })]
})
afterAll(() => database.drop())

async function spokenSession(): Promise<void> {
  const db = database.database
  build = await makeBuild(db, {}, { builder, crew: helper })
  for (const file of [demoBuild.partsFile, demoBuild.planFile]) await importTable(db, build.id, { file: readFileSync(file).toString('base64') })
  steps = (await readPlanView(db, build.id, { archived: false })).steps
  session = await makeSession(db, build)
  const day = demoBuild.sessions[0]!
  await db.insert(sessionSteps).values(steps.filter(step => day.stepNumbers.includes(step.number)).map(step => ({ sessionId: session.id, stepId: step.id })))
  clips = []
  let offsetMs = 0
  for (const clip of day.clips) {
    const row = await makeClip(db, session, { durationMs: clip.durationMs, offsetMs })
    offsetMs += clip.durationMs + 60_000
    await makeCues(db, row, readCaptions(readFileSync(clip.captions)).cues.map(({ startMs, endMs, text }) => ({ startMs, endMs, text })))
    clips.push(row)
  }
}
const run = () => database.database.transaction(tx => pencilSession(tx, session.id))
const list = () => listChapters(database.database, { sessionId: session.id })
const proposals = async () => (await list()).filter(one => one.proposed)
const send = (edit: Edit, user = builder) => changeChapters(database.database, session.id, { id: user.id, role: user === helper ? 'crew' : 'builder' }, chapterChangesSchema.parse(asChanges(edit)))
const newId = () => crypto.randomUUID()
const overlapping = (rows: ChapterView[], clipId: string, startMs: number, endMs: number) => rows.filter(one => one.clipId === clipId && one.startMs < endMs && one.endMs > startMs)
const long = (rows: ChapterView[]) => rows.reduce((best, one) => one.endMs - one.startMs > best.endMs - best.startMs ? one : best)

describe('pencilling a session', () => {
  beforeAll(async () => {
    await spokenSession()
    await run()
  })

  it('covers every clip that is spoken over, without gaps or overlaps, and says why and how sure it is', async () => {
    const rows = await proposals()
    for (const clip of clips) {
      const own = rows.filter(one => one.clipId === clip.id)
      expect(own[0]!.startMs).toBe(0)
      expect(own.at(-1)!.endMs).toBe(clip.durationMs)
      own.slice(1).forEach((one, at) => expect(one.startMs).toBe(own[at]!.endMs))
    }
    expect(rows.every(one => one.inking === 'pencilled' && one.confidence !== null && one.updatedBy === null)).toBe(true)
    expect(rows.some(one => one.evidence.length > 0)).toBe(true)
    expect(rows.some(one => one.alternatives.steps.length > 0 && one.alternatives.operations.length > 0)).toBe(true)
  })

  it('lets search know of them', async () => {
    const rows = await proposals()
    const known = await database.database.select({ chapterId: passages.chapterId }).from(passages).where(eq(passages.sessionId, session.id))
    expect(new Set(known.flatMap(one => one.chapterId ?? [])).size).toBeGreaterThan(rows.length / 2)
  })

  it('changes nothing when it runs again', async () => {
    const before = [await list(), await database.database.select().from(facts).where(eq(facts.sessionId, session.id)), await database.database.select().from(pickups).where(eq(pickups.sessionId, session.id))]
    expect(await run()).toEqual({ chapters: { changed: [], removed: [] }, facts: 0, pickups: 0 })
    expect([await list(), await database.database.select().from(facts).where(eq(facts.sessionId, session.id)), await database.database.select().from(pickups).where(eq(pickups.sessionId, session.id))]).toEqual(before)
  })

  it('gives facts and pick-ups their moment, and a step of this build or none', async () => {
    const rows = await database.database.select().from(facts).where(eq(facts.sessionId, session.id))
    expect(rows.length).toBeGreaterThan(0)
    for (const fact of rows) {
      expect(fact).toMatchObject({ inking: 'pencilled', proposed: true, buildId: build.id })
      expect(fact.stepId === null || steps.some(step => step.id === fact.stepId)).toBe(true)
    }
  })
})

describe('another plan', () => {
  it('is reason to pencil the build\'s sessions again; the same plan is not', async () => {
    await spokenSession()
    const waiting = () => database.database.select({ id: pencillings.sessionId, state: pencillings.state }).from(pencillings).where(eq(pencillings.sessionId, session.id))
    await importTable(database.database, build.id, { file: readFileSync(demoBuild.planFile).toString('base64') })
    expect(await waiting()).toEqual([])
    await importTable(database.database, build.id, { text: 'number,stage,title\n1,Hull,Lay the keel on the shop floor\n' })
    expect(await waiting()).toEqual([{ id: session.id, state: 'waiting' }])
  })
})

describe('what people do', () => {
  beforeAll(async () => {
    await spokenSession()
    await run()
  })

  it('ink stays as it is, and the rest is aligned around it without gaps', async () => {
    const chapter = long(await proposals())
    const other = steps.find(step => step.id !== chapter.stepId && step.number > 20)!
    const outcome = await send(retag(chapter, { stepId: other.id, operation: 'paint' }))
    expect(outcome.chapters[0]).toMatchObject({ id: chapter.id, inking: 'inked', proposed: false, stepId: other.id, confidence: null })
    await run()
    expect((await list()).find(one => one.id === chapter.id)).toEqual(outcome.chapters[0])
    const own = (await list()).filter(one => one.clipId === chapter.clipId)
    own.slice(1).forEach((one, at) => expect(one.startMs).toBe(own[at]!.endMs))
  })

  it('what is taken back is a proposal again and is aligned with the rest', async () => {
    const before = await list()
    const [chapter] = before.filter(one => one.proposed)
    const edit = ink([chapter!])
    const outcome = await send(edit)
    const now = merge(before, outcome)
    expect(now).toEqual((await list()).sort((a, b) => a.clipId.localeCompare(b.clipId) || a.startMs - b.startMs))
    const back = takeBack(doneWith(edit, touchedBy(edit, before), outcome), now)!
    await send(back)
    expect((await list()).find(one => one.id === chapter!.id)).toMatchObject({ proposed: true, inking: 'pencilled', stepId: chapter!.stepId, operation: chapter!.operation, startMs: chapter!.startMs, endMs: chapter!.endMs })
  })

  it('marking over proposals and taking it back leaves no hole and asks nobody', async () => {
    const before = await list()
    const chapter = long(before.filter(one => one.proposed))
    const edit = mark(before, chapter.clipId, chapter.startMs + 2000, chapter.startMs + 6000, { stepId: steps[2]!.id, operation: 'cut', partIds: [] }, newId)
    const outcome = await send(edit)
    const now = merge(before, outcome)
    await send(takeBack(doneWith(edit, touchedBy(edit, before), outcome), now)!)
    const own = (await list()).filter(one => one.clipId === chapter.clipId)
    own.slice(1).forEach((one, at) => expect(one.startMs).toBe(own[at]!.endMs))
    expect(own.some(one => one.id === edit.put.find(put => put.inking === 'inked')!.id)).toBe(false)
  })

  it('a deleted proposal does not come back, until its deletion is taken back', async () => {
    const before = await list()
    const chapter = before.find(one => one.proposed && one.endMs - one.startMs > 3000)!
    const edit = remove(chapter)
    const outcome = await send(edit)
    await run()
    expect(overlapping(await list(), chapter.clipId, chapter.startMs, chapter.endMs)).toEqual([])
    expect(await database.database.select().from(dismissals).where(eq(dismissals.chapterId, chapter.id))).toHaveLength(1)
    await send(takeBack(doneWith(edit, touchedBy(edit, before), outcome), await list())!)
    await run()
    expect(overlapping(await list(), chapter.clipId, chapter.startMs, chapter.endMs)).not.toEqual([])
    expect(await database.database.select().from(dismissals).where(eq(dismissals.chapterId, chapter.id))).toEqual([])
  })

  it('a proposal that a person has parted stays parted', async () => {
    const chapter = long(await proposals())
    const edit = split(chapter, chapter.startMs + 2000, newId)!
    await send(edit)
    await run()
    const halves = (await list()).filter(one => edit.put.some(put => put.id === one.id))
    expect(halves.map(one => [one.inking, one.proposed])).toEqual([['pencilled', false], ['pencilled', false]])
    expect(halves[0]!.endMs).toBe(halves[1]!.startMs)
  })

  it('a person\'s word counts over a proposal that has moved or gone since they looked', async () => {
    const [first, second] = await proposals()
    await database.database.update(chapters).set({ version: first!.version + 3 }).where(eq(chapters.id, first!.id))
    await database.database.delete(chapters).where(eq(chapters.id, second!.id))
    const outcome = await send(ink([first!, second!]))
    expect(outcome.chapters.map(one => [one.id, one.inking])).toEqual(expect.arrayContaining([[first!.id, 'inked'], [second!.id, 'inked']]))
  })

  it('ink that somebody else made meanwhile is still a conflict', async () => {
    const chapter = (await proposals())[0]!
    await send(ink([chapter]))
    await expect(send(retag(chapter, { operation: 'paint' }), helper)).rejects.toMatchObject({ code: expect.stringMatching(/conflict|forbidden/) })
  })

  it('two who edit at once and the program take turns', async () => {
    const [first, second] = (await proposals()).slice(-2)
    await Promise.all([send(ink([first!])), send(ink([second!]), helper), run(), run()])
    expect((await list()).filter(one => [first!.id, second!.id].includes(one.id)).map(one => one.inking)).toEqual(['inked', 'inked'])
  })

  it('what was inked in another session is learned from, and nothing is proposed where nothing is said', async () => {
    const silent = await makeSession(database.database, build)
    await makeClip(database.database, silent)
    expect(await database.database.transaction(tx => pencilSession(tx, silent.id))).toEqual({ chapters: { changed: [], removed: [] }, facts: 0, pickups: 0 })
  })

  it('facts and pick-ups that a person put aside stay so; those of the program go with the words', async () => {
    const db = database.database
    const all = await db.select().from(facts).where(eq(facts.sessionId, session.id))
    const [aside, mended] = all
    await db.update(facts).set({ dismissed: true, proposed: false }).where(eq(facts.id, aside!.id))
    await db.update(facts).set({ value: 99, inking: 'inked', proposed: false }).where(eq(facts.id, mended!.id))
    await run()
    const now = await db.select().from(facts).where(eq(facts.sessionId, session.id))
    expect(now).toHaveLength(all.length)
    expect(now.find(one => one.id === mended!.id)).toMatchObject({ value: 99 })
    await db.execute(`delete from cues where build_id = '${build.id}'`)
    await run()
    expect((await db.select().from(facts).where(eq(facts.sessionId, session.id))).map(one => one.id).sort()).toEqual([aside!.id, mended!.id].sort())
    expect(await db.select().from(chapters).where(and(eq(chapters.sessionId, session.id), eq(chapters.proposed, true)))).toEqual([])
    expect(await db.select().from(pickups).where(eq(pickups.sessionId, session.id))).toEqual([])
  })
})
