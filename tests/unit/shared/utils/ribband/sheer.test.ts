import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { buildPyramid, fairKnots, knotSpacing, monotoneSlopes, soundAt } from '#shared/utils/ribband/sheer'

const level = (seconds: number, at: (n: number) => number) => Uint8Array.from({ length: seconds * 20 }, (_, n) => at(n))

describe('the sound pyramid', () => {
  it('halves until two samples are left', () => {
    const { layers } = buildPyramid(level(60, () => 100), 20)
    expect(layers[0]!.high).toHaveLength(1200)
    expect(layers.at(-1)!.high.length).toBeLessThanOrEqual(2)
    for (let n = 1; n < layers.length; n++) expect(layers[n]!.high).toHaveLength(Math.ceil(layers[n - 1]!.high.length / 2))
  })

  it('tells talk from a planer from silence at any scale', () => {
    const talk = buildPyramid(level(120, n => n % 14 < 9 ? 110 : 3), 20)
    const planer = buildPyramid(level(120, n => 120 + n % 3), 20)
    const quiet = buildPyramid(level(120, () => 2), 20)
    for (const layer of [0, 3, 6]) {
      const [a, b, c] = [talk, planer, quiet].map(sound => soundAt(sound, 60_000 + 200, layer))
      expect(b!.low / b!.high, 'a planer has no gaps').toBeGreaterThan(0.9)
      expect(c!.high, 'silence is low').toBeLessThan(0.1)
      if (layer > 2) {
        expect(a!.low / a!.high, 'talk has gaps').toBeLessThan(0.4)
        expect(a!.high).toBeGreaterThan(0.3)
      }
    }
  })

  it('keeps every layer between silence and full scale, low never above high', () => {
    fc.assert(fc.property(fc.uint8Array({ minLength: 1, maxLength: 600 }), (peaks) => {
      for (const { high, low } of buildPyramid(peaks, 20).layers) {
        high.forEach((value, n) => {
          expect(value).toBeGreaterThanOrEqual(0)
          expect(value).toBeLessThanOrEqual(1 + 1e-6)
          expect(low[n]).toBeLessThanOrEqual(value + 1e-6)
        })
      }
    }))
  })

  it('finds the true least within reach', () => {
    fc.assert(fc.property(fc.uint8Array({ minLength: 1, maxLength: 120 }), fc.nat(), (peaks, pick) => {
      const { high, low } = buildPyramid(peaks, 20).layers[0]!
      const n = pick % peaks.length
      expect(low[n]).toBe(Math.min(...high.slice(Math.max(0, n - 9), n + 10)))
    }))
  })

  it('is silent for a clip without samples', () => {
    expect(soundAt(buildPyramid(new Uint8Array(), 20), 500, 3)).toEqual({ high: 0, low: 0 })
  })
})

describe('knots', () => {
  it('stand at least as far apart as asked, by doubling', () => {
    expect(knotSpacing(4.9, 3, 20)).toEqual({ knotMs: 50, layer: 0 })
    expect(knotSpacing(100, 3, 20)).toEqual({ knotMs: 400, layer: 3 })
    fc.assert(fc.property(fc.double({ min: 1, max: 30_000, noNaN: true }), (msPerPx) => {
      const { knotMs } = knotSpacing(msPerPx, 3, 20)
      expect(knotMs / msPerPx).toBeGreaterThanOrEqual(3 - 1e-9)
      expect(knotMs === 50 || knotMs / msPerPx < 6 + 1e-9).toBe(true)
    }))
  })

  it('are faired without rising above the highest or changing a level run', () => {
    expect([...fairKnots(Float32Array.of(5, 5, 5, 5))]).toEqual([5, 5, 5, 5])
    expect([...fairKnots(Float32Array.of(0, 0, 16, 0, 0))]).toEqual([1, 4, 6, 4, 1])
  })

  it('are joined by a cubic that stays between neighbours', () => {
    const knots = fc.array(fc.float({ min: 0, max: 1, noNaN: true }), { minLength: 2, maxLength: 40 }).map(list => Float32Array.from(list))
    fc.assert(fc.property(knots, (values) => {
      const slopes = monotoneSlopes(values)
      for (let n = 0; n < values.length - 1; n++) {
        const [a, b] = [values[n]!, values[n + 1]!]
        for (const t of [0.1, 0.3, 0.5, 0.7, 0.9]) {
          const [p1, p2] = [a + slopes[n]! / 3, b - slopes[n + 1]! / 3]
          const y = (1 - t) ** 3 * a + 3 * (1 - t) ** 2 * t * p1 + 3 * (1 - t) * t ** 2 * p2 + t ** 3 * b
          expect(y).toBeGreaterThanOrEqual(Math.min(a, b) - 1e-6)
          expect(y).toBeLessThanOrEqual(Math.max(a, b) + 1e-6)
        }
      }
    }))
  })
})
