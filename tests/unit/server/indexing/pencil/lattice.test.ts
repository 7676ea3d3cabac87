import { describe, expect, it } from 'vitest'
import { backward, forward, KINDS, W } from '#server/indexing/pencil/lattice'
import { allTellings, logSumExp, tinyLattice } from './support'

const SEEDS = Array.from({ length: 12 }, (_, i) => i * 7919 + 3)
const shapes: [string, Parameters<typeof tinyLattice>[1]][] = [
  ['plain', {}],
  ['five nodes', { nodes: [0, 1, 2, 4, 5] }],
  ['a seam between clips', { seams: [2] }],
  ['a step under way before', { startsOn: 2 }],
  ['a fixed stretch on a step', { only: (i, j) => i === 1 && j === 2 ? { step: 1, kind: 3 } : null, allowed: (i, j) => !(i < 1 && j > 1) && !(i < 2 && j > 2) }],
  ['a fixed stretch of chat', { only: (i, j) => i === 0 && j === 1 ? { step: null, kind: W } : null, allowed: (i, j) => !(i < 1 && j > 1) }],
  ['a step that does not come into question', { alive: (i, j, s) => s !== 0 || j - i > 1 }],
  ['one step', { S: 1 }],
  ['no step', { S: 0 }],
]

describe.each(shapes)('a lattice with %s', (_, shape) => {
  it.each(SEEDS)('sums over all tellings as counting them one by one does (%i)', (seed) => {
    const lattice = tinyLattice(seed, shape)
    const tellings = allTellings(lattice)
    expect(forward(lattice).logZ).toBeCloseTo(logSumExp(tellings.map(telling => telling.score)), 9)
  })

  it('agrees forward and backward at every node', () => {
    for (const seed of SEEDS) {
      const lattice = tinyLattice(seed, shape)
      const { logZ, ended, entered } = forward(lattice)
      const { afterEnd, afterEnter } = backward(lattice)
      const through = (a: Float64Array, b: Float64Array) => logSumExp([...a].map((value, at) => value + b[at]!))
      expect(through(entered[0]!, afterEnter[0]!)).toBeCloseTo(logZ, 9)
      for (let i = 1; i < lattice.nodes.length - 1; i++) expect(through(entered[i]!, afterEnter[i]!)).toBeCloseTo(through(ended[i]!, afterEnd[i]!), 9)
    }
  })
})

it('has a state for every step last worked on, none included, and every kind', () => {
  const { ended } = forward(tinyLattice(1, { S: 2 }))
  expect(ended[0]!.length).toBe(3 * KINDS)
})
