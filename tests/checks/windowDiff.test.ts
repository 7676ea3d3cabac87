import { describe, expect, it } from 'vitest'
import { halfMeanSegment, pk, windowDiffCounts } from '../measure/indexing/score'

// Outside source: L. Pevzner & M. A. Hearst, "A Critique and Improvement of an Evaluation Metric for Text
// Segmentation", Computational Linguistics 28(1), 2002, for WindowDiff: the share of windows (i, i + k), N − k of
// them, in which reference and hypothesis have different numbers of boundaries between i and i + k; and for what is
// wrong with Pk of D. Beeferman, A. Berger & J. Lafferty, "Statistical Models for Text Segmentation", Machine
// Learning 34, 1999: the share of windows whose ends are wrongly judged to lie in one segment or in two. k is half
// the mean length of a reference segment. The papers print curves and drawings, not tables: the cases below are
// worked out by hand from these definitions, each with its windows counted in a comment.

/** A row of N places with a boundary before each place named. */
const cuts = (length: number, ...at: number[]) => Array.from({ length }, (_, i) => at.includes(i) ? 1 : 0)
const N = 40
const K = 5
/** N − k windows of k places; a lone boundary lies in k of them. */
const WINDOWS = N - K
const wrong = (reference: number[], proposed: number[], k = K) => windowDiffCounts(reference, proposed, k).wrong
const pkWrong = (reference: number[], proposed: number[], k = K) => Math.round(pk(reference, proposed, k) * (reference.length - k))

describe('WindowDiff by its definition', () => {
  it('has N − k windows, none of them wrong when both agree', () => {
    expect(windowDiffCounts(cuts(N, 10, 20, 30), cuts(N, 10, 20, 30), K)).toEqual({ windows: WINDOWS, wrong: 0 })
    expect(windowDiffCounts(cuts(N), cuts(N), K)).toEqual({ windows: WINDOWS, wrong: 0 })
  })

  it('counts k windows for a boundary missed, and as many for one too many', () => {
    // A boundary at 20 lies in windows that start at 15, 16, 17, 18 and 19: (i, i + 5] holds 20.
    expect(wrong(cuts(N, 20), cuts(N))).toBe(5)
    expect(wrong(cuts(N), cuts(N, 20))).toBe(5)
  })

  it('counts twice the distance for a near miss, at most twice k', () => {
    // Reference at 20, proposal at 20 + d: d windows hold only the one and d only the other, until none hold both.
    expect([1, 2, 3, 4, 5, 6, 12].map(d => wrong(cuts(N, 20), cuts(N, 20 + d)))).toEqual([2, 4, 6, 8, 10, 10, 10])
  })

  it('counts every miss and every false boundary alike, also where two lie within one window', () => {
    // Reference 18 and 20, proposal 20 alone: windows that hold 18 are 13 to 17, all of them one boundary short.
    expect(wrong(cuts(N, 18, 20), cuts(N, 20))).toBe(5)
    expect(wrong(cuts(N, 20), cuts(N, 18, 20))).toBe(5)
  })

  it('is the other way round the same', () => {
    const a = cuts(N, 7, 18, 31)
    const b = cuts(N, 9, 18, 25)
    expect(wrong(a, b)).toBe(wrong(b, a))
  })

  it('counts a window once, however far the numbers are apart', () => {
    // Ten boundaries at 15 to 24 against none: windows that hold at least one start at 10 to 23.
    expect(wrong(cuts(N), cuts(N, 15, 16, 17, 18, 19, 20, 21, 22, 23, 24))).toBe(14)
  })

  it('sees fewer windows at the ends of the row', () => {
    // A boundary at 2 lies in the windows that start at 0 and 1; at 38, in those that start at 33 and 34.
    expect(wrong(cuts(N, 2), cuts(N))).toBe(2)
    expect(wrong(cuts(N, 38), cuts(N))).toBe(2)
  })
})

describe('Pk by its definition', () => {
  it('counts k windows for a lone boundary missed or too many, and twice the distance for a near miss', () => {
    expect(pkWrong(cuts(N, 20), cuts(N))).toBe(5)
    expect(pkWrong(cuts(N), cuts(N, 20))).toBe(5)
    expect([1, 2, 5].map(d => pkWrong(cuts(N, 20), cuts(N, 20 + d)))).toEqual([2, 4, 10])
  })

  it('lets a false boundary near a true one go for less than a miss, which WindowDiff does not (the critique’s problem 1 and 2)', () => {
    // Boundaries 18 and 20. Proposal without 18 and 20: windows that hold either start at 13 to 19, 7 are wrong.
    // Proposal without 18: only windows that hold 18 but not 20 are judged wrongly: 13 and 14.
    expect(pkWrong(cuts(N, 18, 20), cuts(N))).toBe(7)
    expect(pkWrong(cuts(N, 18, 20), cuts(N, 20))).toBe(2)
    expect(wrong(cuts(N, 18, 20), cuts(N, 20))).toBe(5)
    // A lone miss costs 5, a false boundary two places before a true one 2: Pk weighs them differently.
    expect(pkWrong(cuts(N, 20), cuts(N, 18, 20))).toBe(2)
    expect(pkWrong(cuts(N, 20), cuts(N))).toBe(5)
  })

  it('does not see how many boundaries a window holds (problem 3)', () => {
    // Between a boundary at 18 and one at 22 lies a third at 20: every window that holds 20 holds 18 or 22 as well.
    expect(pkWrong(cuts(N, 18, 22), cuts(N, 18, 20, 22))).toBe(0)
    expect(wrong(cuts(N, 18, 22), cuts(N, 18, 20, 22))).toBe(5)
  })
})

describe('the width of the window', () => {
  it('is half the mean length of a reference segment, rounded, at least one place', () => {
    expect(halfMeanSegment(40, 4)).toBe(5)
    expect(halfMeanSegment(40, 3)).toBe(7)
    expect(halfMeanSegment(30, 10)).toBe(2)
    expect(halfMeanSegment(5, 5)).toBe(1)
    expect(halfMeanSegment(3, 9)).toBe(1)
  })
})
