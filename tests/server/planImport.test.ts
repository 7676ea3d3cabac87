import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Build } from '#server/database/schema'
import { changePart } from '#server/services/parts'
import { changeStep, readPlanView } from '#server/services/plan'
import { exportTable, importTable, previewImport } from '#server/services/planImport'
import { type TestDatabase, testDatabase } from '../support/database'
import { makeBuild, makePart, makeStep } from '../support/rows'

let test: TestDatabase
let build: Build
beforeAll(async () => {
  test = await testDatabase()
})
afterAll(() => test.drop())
beforeEach(async () => {
  build = await makeBuild(test.database)
})

const planFile = { file: readFileSync('tests/fixtures/plan/skiff-plan.csv').toString('base64') }
const partsFile = { file: readFileSync('tests/fixtures/plan/skiff-parts.csv').toString('base64') }
const plan = () => readPlanView(test.database, build.id, { archived: true })
const preview = (source: Parameters<typeof previewImport>[2]) => previewImport(test.database, build.id, source)
const take = (source: Parameters<typeof importTable>[2]) => importTable(test.database, build.id, source)

describe('a table of the other kind', () => {
  it('is known by its columns, and read as the other when that is wanted', async () => {
    const text = 'Part,No,Task,Qty\nfin,1,Cut the fin,2'
    expect(await preview({ text })).toMatchObject({ what: 'steps', columns: ['No', 'Task'], unknownColumns: ['Part', 'Qty'] })
    expect(await preview({ text, as: 'parts' })).toMatchObject({ what: 'parts', columns: ['Part', 'Qty'], unknownColumns: ['No', 'Task'], rows: [{ title: 'fin', outcome: 'new' }] })
    expect(await take({ text, as: 'parts' })).toMatchObject({ what: 'parts', added: 1 })
    expect((await plan()).steps).toEqual([])
  })

  it('that cannot be read so says which column it would need', async () => {
    await expect(preview({ ...planFile, as: 'parts' })).rejects.toMatchObject({ code: 'unreadable', message: expect.stringContaining('no column “name”') as string })
  })
})

describe('importing a whole plan into an empty build', () => {
  it('adds parts and steps in the order of their files', async () => {
    expect(await take(partsFile)).toEqual({ what: 'parts', added: 17, changed: 0, same: 0, newParts: 0 })
    const first = await preview(planFile)
    expect(first).toMatchObject({ what: 'steps', problems: [], newParts: [], staying: [] })
    expect(first.rows.every(row => row.outcome === 'new')).toBe(true)
    expect((await plan()).steps).toEqual([])

    expect(await take({ ...planFile, seen: first.seen })).toEqual({ what: 'steps', added: 28, changed: 0, same: 0, newParts: 0 })
    const { steps, parts } = await plan()
    expect(steps.map(step => [step.number, step.position])).toEqual(Array.from({ length: 28 }, (_, i) => [i + 1, i]))
    expect(parts[0]).toMatchObject({ name: 'side panel', aliases: ['sides', 'side', 'topsides'], thicknessMm: 6, quantity: 2 })
    const nameOf = new Map(parts.map(part => [part.id, part.name]))
    expect(steps[0]!.partIds.map(id => nameOf.get(id))).toEqual(['side panel', 'bottom panel'])
    expect((await preview(planFile)).rows.every(row => row.outcome === 'same')).toBe(true)
  })

  it('adds the parts that only the steps name, and says so beforehand', async () => {
    const { newParts } = await preview(planFile)
    expect(newParts).toContain('side panel')
    expect(await take(planFile)).toMatchObject({ added: 28, newParts: newParts.length })
    expect((await plan()).parts.map(part => part.name)).toEqual(newParts)
  })

  it.each(['csv', 'md'] as const)('what is exported as %s comes back the same, here and in another build', async (format) => {
    await take(partsFile)
    await take(planFile)
    for (const what of ['parts', 'steps'] as const) {
      const text = await exportTable(test.database, build.id, what, format)
      const again = await preview({ text })
      expect(again).toMatchObject({ what, problems: [], newParts: [], staying: [] })
      expect(new Set(again.rows.map(row => row.outcome))).toEqual(new Set(['same']))
    }
    const before = [await exportTable(test.database, build.id, 'parts', format), await exportTable(test.database, build.id, 'steps', format)] as const
    build = await makeBuild(test.database)
    for (const text of before) await take({ text })
    expect([await exportTable(test.database, build.id, 'parts', format), await exportTable(test.database, build.id, 'steps', format)]).toEqual(before)
  })
})

describe('importing into a plan that stands', () => {
  it('changes what differs, puts new steps beside their neighbours and removes nothing', async () => {
    const step = await makeStep(test.database, build, { title: 'Cut', status: 'done', spentMinutes: 40, description: 'By hand' })
    await makeStep(test.database, build, { title: 'Paint' })
    await makeStep(test.database, build, { title: 'Launch' })
    expect((await preview({ text: 'number,title\n1,Cut out\n9,Glue\n2,Paint' })).staying).toEqual(['3 Launch'])
    expect(await take({ text: 'number,title\n1,Cut out\n9,Glue\n2,Paint' })).toEqual({ what: 'steps', added: 1, changed: 1, same: 1, newParts: 0 })
    const { steps } = await plan()
    expect(steps.map(one => [one.number, one.title])).toEqual([[1, 'Cut out'], [9, 'Glue'], [2, 'Paint'], [3, 'Launch']])
    expect(steps[0]).toMatchObject({ id: step.id, status: 'done', spentMinutes: 40, description: 'By hand' })
  })

  it('brings archived steps and parts back', async () => {
    const [fin, step] = [await makePart(test.database, build, { name: 'fin' }), await makeStep(test.database, build, { title: 'Cut' })]
    await changePart(test.database, build.id, fin.id, { archived: true })
    await changeStep(test.database, build.id, step.id, { archived: true })
    expect(await preview({ text: 'number,title,parts\n1,Cut,FIN' })).toMatchObject({ newParts: [], restoredParts: ['fin'], rows: [{ restored: true, outcome: 'changed' }] })
    await take({ text: 'number,title,parts\n1,Cut,FIN' })
    expect(await plan()).toMatchObject({ steps: [{ archived: false, partIds: [fin.id] }], parts: [{ name: 'fin', archived: false }] })
  })

  it('refuses the whole table when one row is wrong, and says which', async () => {
    await makeStep(test.database, build, { title: 'Cut' })
    const text = 'number,title,planned_hours,parts\n1,Cut out,2,fin\n2,Glue,two,'
    expect((await preview({ text })).problems).toHaveLength(1)
    await expect(take({ text })).rejects.toMatchObject({ code: 'unreadable', message: 'One entry needs mending, so nothing was imported. Row 3, planned_hours: “two” is not a number of hours. Write it as 2 or 2.5.', data: { problems: [{ row: 3, column: 'planned_hours' }] } })
    expect(await plan()).toMatchObject({ steps: [{ title: 'Cut' }], parts: [] })
  })

  it('refuses to import on a preview that is out of date', async () => {
    const step = await makeStep(test.database, build, { title: 'Cut' })
    const text = 'number,title\n1,Cut out'
    const { seen } = await preview({ text })
    await changeStep(test.database, build.id, step.id, { title: 'Saw' })
    await expect(take({ text, seen })).rejects.toMatchObject({ code: 'conflict' })
    expect((await plan()).steps[0]!.title).toBe('Saw')
    expect(await take({ text, seen: (await preview({ text })).seen })).toMatchObject({ changed: 1 })
  })

  it('says what a table must look like when it names no column', async () => {
    await expect(preview({ text: 'hello\nthere' })).rejects.toMatchObject({ code: 'unreadable', message: expect.stringContaining('number, stage, title') })
  })

  it('leaves other builds alone', async () => {
    const other = await makeBuild(test.database)
    await makeStep(test.database, other, { title: 'Theirs' })
    await take({ text: 'number,title,parts\n1,Ours,fin' })
    expect(await readPlanView(test.database, other.id, { archived: true })).toMatchObject({ steps: [{ title: 'Theirs', partIds: [] }], parts: [] })
  })
})
