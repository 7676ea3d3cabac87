import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { type Build, stepParts } from '#server/database/schema'
import { addPart, changePart, listParts, orderParts } from '#server/services/parts'
import { addStep, changeStep, orderSteps, readPlanView } from '#server/services/plan'
import { newPartSchema, newStepSchema } from '#shared/schemas/plan'
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
const add = (values: object) => addStep(test.database, build.id, newStepSchema.parse(values))
const order = async () => (await readPlanView(test.database, build.id, { archived: true })).steps.map(step => step.number)

describe('adding a step', () => {
  it('gives it the next number and the last place, or the place asked for', async () => {
    const first = await add({ title: 'Cut' })
    await add({ title: 'Paint' })
    const between = await add({ title: 'Glue', afterId: first.id, number: 10, stage: 'Hull', materials: ['epoxy', 'Epoxy', ' '] })
    expect(between).toMatchObject({ number: 10, position: 1, stage: 'Hull', materials: ['epoxy'], status: 'to-do', archived: false })
    expect((await add({ title: 'Launch' })).number).toBe(11)
    expect(await order()).toEqual([1, 10, 2, 11])
  })

  it('refuses a number that is taken, also by an archived step, and adds nothing', async () => {
    const step = await add({ title: 'Cut', number: 4 })
    await changeStep(test.database, build.id, step.id, { archived: true })
    await expect(add({ title: 'Glue', number: 4 })).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('“Cut”, which is archived'), data: { issues: [{ path: 'number', message: '4 is taken' }] } })
    expect(await order()).toEqual([4])
  })

  it('refuses parts of another build, and a place behind a step of another build', async () => {
    const other = await makeBuild(test.database)
    const [strange, strangeStep] = [await makePart(test.database, other), await makeStep(test.database, other)]
    await expect(add({ title: 'Cut', partIds: [strange.id] })).rejects.toMatchObject({ code: 'bad-input' })
    await expect(add({ title: 'Cut', afterId: strangeStep.id })).rejects.toMatchObject({ code: 'bad-input' })
    expect(await order()).toEqual([])
  })

  it('takes turns when many add at once', async () => {
    await Promise.all(Array.from({ length: 12 }, (_, i) => add({ title: `Step ${i}` })))
    const { steps } = await readPlanView(test.database, build.id, { archived: true })
    expect(steps.map(step => step.number)).toEqual(Array.from({ length: 12 }, (_, i) => i + 1))
    expect(steps.map(step => step.position)).toEqual(Array.from({ length: 12 }, (_, i) => i))
  })
})

describe('changing a step', () => {
  it('changes what is given, with its parts in the order of the parts list', async () => {
    const [keel, fin] = [await makePart(test.database, build), await makePart(test.database, build)]
    const step = await add({ title: 'Cut', description: 'By hand', plannedMinutes: 90 })
    const changed = await changeStep(test.database, build.id, step.id, { status: 'under-way', partIds: [fin.id, keel.id], plannedMinutes: null })
    expect(changed).toMatchObject({ title: 'Cut', description: 'By hand', status: 'under-way', plannedMinutes: null, partIds: [keel.id, fin.id] })
    expect((await changeStep(test.database, build.id, step.id, { partIds: [fin.id] })).partIds).toEqual([fin.id])
  })

  it('archives it without losing anything and brings it back where it stood', async () => {
    const steps = [await add({ title: 'A' }), await add({ title: 'B' }), await add({ title: 'C' })]
    await changeStep(test.database, build.id, steps[1]!.id, { archived: true })
    expect((await readPlanView(test.database, build.id, { archived: false })).steps.map(step => step.title)).toEqual(['A', 'C'])
    await orderSteps(test.database, build.id, [steps[2]!.id, steps[0]!.id])
    await changeStep(test.database, build.id, steps[1]!.id, { archived: false })
    expect((await readPlanView(test.database, build.id, { archived: false })).steps.map(step => step.title)).toEqual(['C', 'A', 'B'])
  })

  it('does not reach a step of another build, and leaves it as it was', async () => {
    const other = await makeBuild(test.database)
    const strange = await makeStep(test.database, other, { title: 'Theirs' })
    await expect(changeStep(test.database, build.id, strange.id, { title: 'Ours' })).rejects.toMatchObject({ code: 'not-found' })
    expect((await readPlanView(test.database, other.id, { archived: true })).steps[0]!.title).toBe('Theirs')
  })
})

describe('the order of steps', () => {
  it('is kept, and refused when the plan has changed meanwhile', async () => {
    const [a, b, c] = [await add({ title: 'A' }), await add({ title: 'B' }), await add({ title: 'C' })]
    await orderSteps(test.database, build.id, [c.id, a.id, b.id])
    expect(await order()).toEqual([3, 1, 2])
    await add({ title: 'D' })
    await expect(orderSteps(test.database, build.id, [a.id, b.id, c.id])).rejects.toMatchObject({ code: 'conflict' })
    expect(await order()).toEqual([3, 1, 2, 4])
  })
})

describe('parts', () => {
  const addOne = (values: object) => addPart(test.database, build.id, newPartSchema.parse(values))

  it('are added, changed and put in order', async () => {
    const fin = await addOne({ name: 'fin', aliases: ['skeg'], thicknessMm: 6.3504 })
    const keel = await addOne({ name: 'keel', quantity: 1 })
    expect(fin).toMatchObject({ position: 0, thicknessMm: 6.35, quantity: null })
    await orderParts(test.database, build.id, [keel.id, fin.id])
    await changePart(test.database, build.id, keel.id, { material: 'oak' })
    expect((await listParts(test.database, build.id, { archived: false })).map(part => [part.name, part.material])).toEqual([['keel', 'oak'], ['fin', '']])
  })

  it('have one name each, whatever its letter case', async () => {
    await addOne({ name: 'Fin' })
    const keel = await addOne({ name: 'keel' })
    await expect(addOne({ name: 'FIN' })).rejects.toMatchObject({ code: 'conflict' })
    await expect(changePart(test.database, build.id, keel.id, { name: 'fin' })).rejects.toMatchObject({ code: 'conflict' })
    expect(await changePart(test.database, build.id, keel.id, { name: 'Keel' })).toMatchObject({ name: 'Keel' })
  })

  it('keep their steps while they are archived, even when the step\'s other parts change', async () => {
    const [fin, keel] = [await addOne({ name: 'fin' }), await addOne({ name: 'keel' })]
    const step = await add({ title: 'Cut', partIds: [fin.id, keel.id] })
    await changePart(test.database, build.id, fin.id, { archived: true })
    expect((await readPlanView(test.database, build.id, { archived: true })).steps[0]!.partIds).toEqual([keel.id])
    await changeStep(test.database, build.id, step.id, { partIds: [] })
    await changePart(test.database, build.id, fin.id, { archived: false })
    expect((await readPlanView(test.database, build.id, { archived: true })).steps[0]!.partIds).toEqual([fin.id])
    expect(await test.database.select().from(stepParts).where(eq(stepParts.stepId, step.id))).toHaveLength(1)
  })
})
