import { describe, expect, it } from 'vitest'
import { gather } from '#server/indexing/pencil/material'
import { BY_JUDGEMENT, WEIGHT_NAMES, type Weights } from '#server/indexing/pencil/model'
import { listen } from '#server/indexing/pencil/speech'
import { indexSteps } from '#server/indexing/pencil/stepEvidence'
import { expectedCounts, trueCounts } from '../../../measure/indexing/counts'
import { clipOf, numbers, PARTS, STEPS, talk } from '../../server/indexing/pencil/support'

const material = gather(listen([clipOf([...talk(2).slice(0, 3), 'hello and welcome back', 'sweep up and wipe the bench', ...talk(3).slice(0, 3)])]), indexSteps(STEPS.slice(1, 3), PARTS))
const fitted = WEIGHT_NAMES.filter(name => !(name in BY_JUDGEMENT))
const weightsFrom = (seed: number): Weights => {
  const random = numbers(seed)
  return Object.fromEntries(fitted.map(name => [name, random() / 2]))
}

describe('what the model expects of its features', () => {
  // The slope of logZ by a weight is what is expected of its feature: measured by moving each weight a little.
  it.each([1, 2])('is the slope of the log of the sum over all tellings, for every weight (%i)', (seed) => {
    const weights = weightsFrom(seed)
    const { counts } = expectedCounts(material, weights)
    const by = 1e-4
    const off = fitted.flatMap((name) => {
      const up = expectedCounts(material, { ...weights, [name]: weights[name]! + by }).logZ
      const down = expectedCounts(material, { ...weights, [name]: weights[name]! - by }).logZ
      const slope = (up - down) / (2 * by)
      return Math.abs(slope - (counts[name] ?? 0)) > 1e-3 ? [`${name}: slope ${slope.toFixed(4)}, expected ${(counts[name] ?? 0).toFixed(4)}`] : []
    })
    expect(off).toEqual([])
  }, 60_000)

  it('is never likelier than certain: the true telling scores below the sum of all', () => {
    const { nodes } = material
    const last = nodes.length - 1
    const middle = Math.floor(last / 2)
    const truth = [{ i: 0, j: middle, step: 0, kind: 2 }, { i: middle, j: last, step: 1, kind: 6 }]
    for (const seed of [1, 2, 3]) {
      const weights = weightsFrom(seed)
      const score = Object.entries(trueCounts(material, truth)).reduce((sum, [name, value]) => sum + (weights[name] ?? 0) * value, 0)
      expect(score).toBeLessThan(expectedCounts(material, weights).logZ)
    }
  })
})

describe('what is true of the features', () => {
  const last = material.nodes.length - 1
  it('counts a first step, the move to the next, a chat and what is taken up again', () => {
    const a = Math.floor(last / 3)
    const b = Math.floor(2 * last / 3)
    const first = trueCounts(material, [{ i: 0, j: a, step: 0, kind: 2 }, { i: a, j: last, step: 1, kind: 6 }])
    expect(first).toMatchObject({ 'to.first': 1, 'to.plus1': 1, 'begins.shape': 1, 'begins.glue': 1, 'turn.always': 1 })
    const chat = trueCounts(material, [{ i: 0, j: a, step: 0, kind: 2 }, { i: a, j: b, step: null, kind: 14 }, { i: b, j: last, step: 0, kind: 2 }])
    expect(chat).toMatchObject({ 'to.first': 1, 'to.none': 1, 'to.resume': 1, 'begins.shape': 1, 'turn.always': 2 })
    const change = trueCounts(material, [{ i: 0, j: a, step: 0, kind: 2 }, { i: a, j: last, step: 0, kind: 6 }])
    expect(change).toMatchObject({ 'to.first': 1, 'then.forward': 1 })
    expect(change).not.toHaveProperty('to.plus1')
  })
})
