import { describe, expect, it } from 'vitest'
import { CutFinder, difference, histogramOf, splitSuspects, SuspectFinder } from '../../../../../workers/media/ffmpeg/scenes'

const even = (r: number, g: number, b: number) => histogramOf(Uint8Array.from({ length: 300 }, (_, i) => [r, g, b][i % 3]!))
/** A share of the picture in one colour, the rest in another. */
const mixed = (share: number) => histogramOf(Uint8Array.from({ length: 3000 }, (_, i) => i / 3000 < share ? 200 : 20))

describe('difference', () => {
  it('is nothing between equal pictures and all between pictures without a colour in common', () => {
    expect(difference(even(10, 20, 30), even(12, 22, 28))).toBe(0)
    expect(difference(even(10, 20, 30), even(200, 20, 30))).toBe(1)
    expect(difference(mixed(0.5), mixed(0.75))).toBeCloseTo(0.25, 2)
  })
})

describe('CutFinder', () => {
  it('finds where the picture changes for good, at the first new picture', () => {
    const finder = new CutFinder()
    for (let i = 0; i < 60; i++) finder.take(i * 40, i < 30 ? even(150, 100, 60) : even(40, 60, 80))
    expect(finder.finish()).toEqual([1200])
  })

  it('does not take steady change for cuts, as in a whip pan', () => {
    const finder = new CutFinder()
    for (let i = 0; i < 60; i++) finder.take(i * 40, i % 2 ? mixed(0.2) : mixed(0.6))
    expect(finder.finish()).toEqual([])
  })
})

describe('suspects', () => {
  it('are stretches between keyframes that differ', () => {
    const finder = new SuspectFinder()
    finder.take(0, even(150, 100, 60))
    finder.take(2000, even(150, 100, 60))
    finder.take(4000, even(40, 60, 80))
    expect(finder.suspects).toEqual([{ fromMs: 2000, toMs: 4000, difference: 1 }])
  })

  it('are looked at strongest first while the budget lasts', () => {
    const suspects = [
      { fromMs: 0, toMs: 2000, difference: 0.3 },
      { fromMs: 4000, toMs: 6000, difference: 0.9 },
      { fromMs: 8000, toMs: 10_000, difference: 0.6 },
    ]
    expect(splitSuspects(suspects, 3000)).toEqual({ look: [suspects[1]], unseenMs: [10_000] })
  })
})
