import { describe, expect, it } from 'vitest'
import { OPERATIONS } from '#shared/types/trade'
import type { PartView, StepView } from '#shared/types/plan'
import { OPERATION_KEYS, operationOfKey } from '#shared/utils/operationKeys'
import { createStepFinder } from '#shared/utils/picker/steps'

const part = (id: string, name: string, aliases: string[] = []) => ({ id, name, aliases }) as PartView
const parts = [part('bow', 'bow transom', ['front board']), part('log', 'chine log', ['chine']), part('keel', 'keelson')]
const step = (number: number, title: string, stage: string, partIds: string[] = [], archived = false): StepView =>
  ({ id: `s${number}`, number, position: number - 1, title, stage, partIds, archived, description: '', materials: [], status: 'to-do', plannedMinutes: null, spentMinutes: null })
const steps = [
  step(1, 'Set up the strongback', 'Setting up'), step(2, 'Glue the cheeks', 'Transoms', ['bow']), step(3, 'Bevel the logs', 'Chines', ['log']),
  step(12, 'Lay the keelson', 'Backbone', ['keel']), step(13, 'Old way', 'Backbone', [], true),
]
const finder = (near: { today?: string[], recent?: string[] } = {}) => createStepFinder(steps, parts, { today: near.today ?? [], recent: near.recent ?? [] })
const found = (typed: string, near = {}) => finder(near).find(typed).map(one => one.step.number)

describe('the step picker', () => {
  it('shows today’s steps, then those picked lately, then the plan, without archived ones', () => {
    expect(found('', { today: ['s3'], recent: ['s12', 's2'] })).toEqual([3, 12, 2, 1])
    expect(finder({ today: ['s3'], recent: ['s12'] }).all.map(one => one.because)).toEqual(['today', 'recent', '', ''])
  })
  it('puts today’s steps in the order they were last picked', () => {
    expect(found('', { today: ['s1', 's2', 's3'], recent: ['s3'] }).slice(0, 3)).toEqual([3, 1, 2])
  })
  it('takes digits for the number, the exact one first', () => {
    expect(found('1')).toEqual([1, 12])
    expect(found('12')).toEqual([12])
  })
  it.each([['cheeks', 2], ['front board', 2], ['chine', 3], ['keelsn', 12], ['backbone', 12], ['transoms', 2]])('finds “%s”', (typed, number) => {
    expect(found(typed)[0]).toBe(number)
  })
  it('finds nothing for what is not there', () => {
    expect(found('zzzzqq')).toEqual([])
  })
})

describe('operation letters', () => {
  it('are one each, no two alike', () => {
    expect(new Set(OPERATIONS.map(operation => OPERATION_KEYS[operation])).size).toBe(OPERATIONS.length)
    for (const operation of OPERATIONS) expect(operationOfKey(OPERATION_KEYS[operation].toUpperCase())).toBe(operation)
    expect(operationOfKey('q')).toBeNull()
  })
})
