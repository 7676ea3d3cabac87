import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fromLine, layLine, toLine } from '#shared/utils/ribband/line'

const span = (startMs: number, endMs: number) => ({ startMs, endMs })

describe('layLine', () => {
  it('lays clips end to end and leaves the hours between out', () => {
    const line = layLine([span(100_000, 130_000), span(0, 10_000)])
    expect(line).toEqual({ lengthMs: 40_000, stretches: [{ startMs: 0, endMs: 10_000, lineMs: 0 }, { startMs: 100_000, endMs: 130_000, lineMs: 10_000 }] })
  })

  it('keeps overlapping cameras in one stretch', () => {
    expect(layLine([span(0, 10), span(5, 20), span(8, 12)]).stretches).toEqual([{ startMs: 0, endMs: 20, lineMs: 0 }])
  })

  it('puts a time between clips on their joint, and a joint at the start of what follows', () => {
    const line = layLine([span(0, 10_000), span(100_000, 130_000)])
    expect(toLine(line, 50_000)).toBe(10_000)
    expect(fromLine(line, 10_000)).toBe(100_000)
    expect(fromLine(line, 9999)).toBe(9999)
  })

  it('holds what is before or after the footage', () => {
    const line = layLine([span(500, 1000)])
    expect([toLine(line, 0), toLine(line, 5000), fromLine(line, -5), fromLine(line, 9999)]).toEqual([0, 500, 500, 1000])
  })

  it('answers without footage', () => {
    expect([toLine(layLine([]), 5), fromLine(layLine([]), 5)]).toEqual([0, 0])
  })

  it('there and back is the same time wherever there is footage', () => {
    const clips = fc.array(fc.tuple(fc.integer({ min: 0, max: 1e6 }), fc.integer({ min: 1, max: 1e5 })).map(([start, length]) => span(start, start + length)), { minLength: 1, maxLength: 8 })
    fc.assert(fc.property(clips, fc.nat(7), fc.double({ min: 0, max: 0.999, noNaN: true }), (spans, index, share) => {
      const line = layLine(spans)
      const clip = spans[index % spans.length]!
      const at = clip.startMs + Math.floor((clip.endMs - clip.startMs) * share)
      expect(fromLine(line, toLine(line, at))).toBe(at)
    }))
  })

  it('never runs backwards', () => {
    const line = layLine([span(0, 100), span(300, 400), span(900, 1000)])
    fc.assert(fc.property(fc.integer({ min: -50, max: 1100 }), fc.nat(200), (at, later) => {
      expect(toLine(line, at + later)).toBeGreaterThanOrEqual(toLine(line, at))
    }))
  })
})
