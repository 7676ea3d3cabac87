import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findSilences, PEAKS_PER_SECOND, SoundReducer } from '../../../../../workers/media/ffmpeg/sound'

function samples(values: number[]): Buffer {
  const buffer = Buffer.alloc(values.length * 2)
  values.forEach((value, i) => buffer.writeInt16LE(value, i * 2))
  return buffer
}

/** Loudness by seconds: `[seconds, dB]` pairs laid end to end. */
function loudness(...parts: [number, number][]): number[] {
  return parts.flatMap(([seconds, db]) => Array.from({ length: Math.round(seconds * PEAKS_PER_SECOND) }, () => db))
}

describe('SoundReducer', () => {
  it('gives the peak of every 50 ms as a byte', () => {
    const reducer = new SoundReducer(8000)
    reducer.take(samples([...Array<number>(400).fill(0), ...Array<number>(399).fill(100), -32_768, ...Array<number>(400).fill(16_384)]))
    expect([...reducer.finish().peaks]).toEqual([0, 255, 128])
  })

  it('measures loudness below full scale', () => {
    const reducer = new SoundReducer(8000)
    reducer.take(samples(Array.from({ length: 800 }, (_, i) => i % 2 ? 3277 : -3277)))
    expect(reducer.finish().loudnessDb).toEqual([-20, -20])
  })

  it('does not drift at rates that 20 does not divide', () => {
    const reducer = new SoundReducer(11_025)
    reducer.take(Buffer.alloc(11_025 * 2 * 60))
    expect(reducer.finish().peaks.length).toBe(60 * PEAKS_PER_SECOND)
  })

  it('gives the same however the stream is cut', () => {
    fc.assert(fc.property(
      fc.array(fc.integer({ min: -32_768, max: 32_767 }), { minLength: 1, maxLength: 300 }),
      fc.array(fc.integer({ min: 1, max: 50 }), { minLength: 1, maxLength: 30 }),
      (values, cuts) => {
        const whole = new SoundReducer(1000)
        whole.take(samples(values))
        const pieces = new SoundReducer(1000)
        const data = samples(values)
        for (let at = 0, i = 0; at < data.length; i++) {
          const length = cuts[i % cuts.length]!
          pieces.take(data.subarray(at, at + length))
          at += length
        }
        expect(pieces.finish()).toEqual(whole.finish())
      },
    ))
  })
})

describe('findSilences', () => {
  it('finds gaps in speech in a quiet room', () => {
    expect(findSilences(loudness([3, -20], [1.2, -70], [4, -22], [1, -70], [3, -20])))
      .toEqual([{ startMs: 3000, endMs: 4200 }, { startMs: 8200, endMs: 9200 }])
  })

  it('finds them over a machine that a fixed level would take for speech', () => {
    expect(findSilences(loudness([3, -12], [1.2, -34], [4, -13], [1, -33], [3, -12])))
      .toEqual([{ startMs: 3000, endMs: 4200 }, { startMs: 8200, endMs: 9200 }])
  })

  it('follows the floor when the machine is switched on', () => {
    const quiet = loudness([40, -20], [1, -70], [40, -20], [2, -70], [37, -20])
    const noisy = loudness([40, -12], [1, -34], [40, -12], [10, -34], [29, -12])
    expect(findSilences([...quiet, ...noisy])).toEqual([
      { startMs: 40_000, endMs: 41_000 }, { startMs: 81_000, endMs: 83_000 },
      { startMs: 160_000, endMs: 161_000 }, { startMs: 201_000, endMs: 211_000 },
    ])
  })

  it('finds none in even noise and only silence in silence', () => {
    expect(findSilences(loudness([60, -30]))).toEqual([])
    expect(findSilences(loudness([60, -85]))).toEqual([{ startMs: 0, endMs: 60_000 }])
  })

  it('passes over pauses for breath, and over a click within a silence', () => {
    expect(findSilences(loudness([5, -20], [0.5, -70], [5, -20], [0.5, -70], [0.05, -25], [0.5, -70], [5, -20])))
      .toEqual([{ startMs: 10_500, endMs: 11_550 }])
  })
})
