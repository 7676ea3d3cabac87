import { describe, expect, it } from 'vitest'
import { KINDS, type Lattice, W } from '#server/indexing/pencil/lattice'
import { decode, type Marginals, marginalsOf } from '#server/indexing/pencil/marginals'
import { allTellings, logSumExp, tinyLattice } from './support'

const shapes: [string, Parameters<typeof tinyLattice>[1]][] = [
  ['plain', {}],
  ['a seam between clips', { seams: [1, 2] }],
  ['a step under way before', { startsOn: 1 }],
  ['a fixed stretch', { only: (i, j) => i === 1 && j === 2 ? { step: 0, kind: 0 } : null, allowed: (i, j) => !(i < 1 && j > 1) && !(i < 2 && j > 2) }],
  ['a step out of question', { alive: (i, j, s) => s !== 1 || i > 0 }],
]
const SEEDS = [5, 77, 901, 4242, 31337, 99991]

function byCounting(lattice: Lattice): Marginals {
  const { S, nodes } = lattice
  const tellings = allTellings(lattice)
  const logZ = logSumExp(tellings.map(telling => telling.score))
  const cues = nodes.at(-1)!
  const steps = new Float64Array((cues + 1) * (S + 1))
  const kinds = new Float64Array((cues + 1) * KINDS)
  const turns = new Float64Array(nodes.length)
  for (const { chapters, score } of tellings) {
    const p = Math.exp(score - logZ)
    for (const { i, j, step, kind } of chapters) {
      if (i) turns[i]! += p
      for (let cue = nodes[i]!; cue < nodes[j]!; cue++) {
        steps[cue * (S + 1) + (step ?? S)]! += p
        kinds[cue * KINDS + kind]! += p
      }
    }
  }
  return { steps, kinds, turns }
}

const expectClose = (a: Float64Array, b: Float64Array) => expect(Math.max(...a.map((value, at) => Math.abs(value - b[at]!)))).toBeLessThan(1e-9)

describe.each(shapes)('marginals of a lattice with %s', (_, shape) => {
  it.each(SEEDS)('are those of counting all tellings (%i)', (seed) => {
    const lattice = tinyLattice(seed, shape)
    const mine = marginalsOf(lattice, lattice.nodes.at(-1)!)
    const theirs = byCounting(lattice)
    expectClose(mine.steps, theirs.steps)
    expectClose(mine.kinds, theirs.kinds)
    expectClose(mine.turns, theirs.turns)
  })

  it('add up to one at every cue', () => {
    const lattice = tinyLattice(11, shape)
    const { steps, kinds } = marginalsOf(lattice, 6)
    for (let cue = 0; cue < 6; cue++) {
      expect(steps.slice(cue * (lattice.S + 1), (cue + 1) * (lattice.S + 1)).reduce((a, b) => a + b)).toBeCloseTo(1, 9)
      expect(kinds.slice(cue * KINDS, (cue + 1) * KINDS).reduce((a, b) => a + b)).toBeCloseTo(1, 9)
    }
  })
})

describe('decode', () => {
  const options = { operation: 0.75, turn: 3, bar: 0.4 }
  const seconds = Float64Array.of(4, 3, 5, 2, 6, 4)

  /** What a telling is worth by the definition: right time expected, and turns by their likelihood. */
  function worth(lattice: Lattice, { steps, kinds, turns }: Marginals, chapters: { i: number, j: number, step: number | null, kind: number }[]): number {
    const { S, nodes } = lattice
    let value = 0
    for (const { i, j, step, kind } of chapters) {
      if (i) value += options.turn * (turns[i]! - options.bar)
      if (lattice.only(i, j)) {
        value += 1e6
        continue
      }
      for (let cue = nodes[i]!; cue < nodes[j]!; cue++) value += seconds[cue]! * (steps[cue * (S + 1) + (step ?? S)]! + options.operation * kinds[cue * KINDS + kind]!)
    }
    return value
  }

  it.each(SEEDS)('finds a telling that is worth as much as any (%i)', (seed) => {
    for (const [, shape] of shapes) {
      const lattice = tinyLattice(seed, shape)
      const marginals = marginalsOf(lattice, 6)
      const found = decode(lattice, marginals, seconds, options)
      // Here any row of states may stand side by side: what may follow what is in the marginals.
      let most = -Infinity
      const on = (i: number, chapters: { i: number, j: number, step: number | null, kind: number }[]): void => {
        if (i === lattice.nodes.length - 1) {
          most = Math.max(most, worth(lattice, marginals, chapters))
          return
        }
        for (let j = i + 1; j < lattice.nodes.length; j++) {
          if (!lattice.allowed(i, j)) continue
          const only = lattice.only(i, j)
          const states = only ? [only] : [0, 1, null].flatMap(step => (step === null ? [W, W + 1, W + 2] : [0, 3]).map(kind => ({ step, kind })))
          for (const state of states) on(j, [...chapters, { i, j, ...state }])
        }
      }
      on(0, [])
      const at = (cue: number) => lattice.nodes.indexOf(cue)
      expect(worth(lattice, marginals, found.map(({ from, to, step, kind }) => ({ i: at(from), j: at(to), step, kind })))).toBeCloseTo(most, 6)
    }
  })

  it('covers all cues end to end, says confidence from 0 to 1, and keeps what is fixed', () => {
    const [, shape] = shapes[3]!
    const lattice = tinyLattice(8, shape)
    const found = decode(lattice, marginalsOf(lattice, 6), seconds, options)
    expect(found[0]!.from).toBe(0)
    expect(found.at(-1)!.to).toBe(6)
    found.slice(1).forEach((chapter, i) => expect(chapter.from).toBe(found[i]!.to))
    for (const { confidence } of found) expect(confidence >= 0 && confidence <= 1).toBe(true)
    expect(found).toContainEqual(expect.objectContaining({ from: 2, to: 3, step: 0, kind: 0 }))
  })
})
