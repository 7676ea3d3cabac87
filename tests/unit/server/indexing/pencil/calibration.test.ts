import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { confidenceOf, type Curve } from '#server/indexing/pencil/calibration'

const curve: Curve = [[0, 0], [0.4, 0.2], [0.8, 0.7], [1, 0.9]]

describe('confidence from likelihood', () => {
  it.each([[0, 0], [0.2, 0.1], [0.4, 0.2], [0.6, 0.45], [0.8, 0.7], [0.9, 0.8], [1, 0.9]])('%s is %s', (likelihood, right) => expect(confidenceOf(likelihood, curve)).toBe(right))
  it('stays at the ends of the curve, and within 0 and 1', () => {
    expect([-1, 2].map(x => confidenceOf(x, curve))).toEqual([0, 0.9])
    expect(confidenceOf(0.5, [])).toBe(0)
    expect(confidenceOf(0.9, [[0, 0], [0.5, 0.6]])).toBe(0.6)
    expect(confidenceOf(0.5, [[0, 0], [0.5, 0.2], [0.5, 0.6], [1, 1]])).toBe(0.2)
  })
  it('never falls when the likelihood rises, on a curve that rises', () => {
    const ratio = fc.double({ min: 0, max: 1, noNaN: true })
    fc.assert(fc.property(fc.array(fc.tuple(ratio, ratio), { maxLength: 6 }), ratio, ratio, (points, a, b) => {
      const xs = points.map(([x]) => x).sort((p, q) => p - q)
      const ys = points.map(([, y]) => y).sort((p, q) => p - q)
      const rising: Curve = [[0, 0], ...xs.map((x, i) => [x, ys[i]!] as const), [1, 1]]
      expect(confidenceOf(Math.min(a, b), rising)).toBeLessThanOrEqual(confidenceOf(Math.max(a, b), rising))
    }))
  })
})
