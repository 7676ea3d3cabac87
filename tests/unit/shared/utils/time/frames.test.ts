import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { canDropFrames, frameToMs, frameToTimecode, msToFrame, timecodeToFrame, type FrameRate } from '#shared/utils/timecode'

const rate = (num: number, den = 1): FrameRate => ({ num, den })
const RATES = [rate(24_000, 1001), rate(24), rate(25), rate(30_000, 1001), rate(30), rate(50), rate(60_000, 1001), rate(60), rate(120), rate(15), rate(25, 2), rate(90_000, 3003)]
const aRate = fc.constantFrom(...RATES)
const aFrame = fc.integer({ min: 0, max: 20_000_000 })

describe('msToFrame and frameToMs', () => {
  it.each([
    [rate(25), 0, 0], [rate(25), 39, 0], [rate(25), 40, 1], [rate(25), 79, 1], [rate(25), 80, 2],
    [rate(30), 33, 0], [rate(30), 34, 1], [rate(30), 66, 1], [rate(30), 67, 2], [rate(30), 100, 3],
    [rate(30_000, 1001), 33, 0], [rate(30_000, 1001), 34, 1], [rate(30_000, 1001), 1001, 30], [rate(30_000, 1001), 1000, 29],
    [rate(30_000, 1001), 3_600_000, 107_892],
  ])('at %o, %d ms is in frame %d', (r, ms, frame) => {
    expect(msToFrame(ms, r)).toBe(frame)
  })

  it('lands in the frame asked for, and its first millisecond is the first', () => {
    fc.assert(fc.property(aFrame, aRate, (frame, r) => {
      const ms = frameToMs(frame, r)
      expect(msToFrame(ms, r)).toBe(frame)
      if (ms > 0) expect(msToFrame(ms - 1, r)).toBe(frame - 1)
    }))
  })

  it('stays exact where doubles no longer are', () => {
    // 2^50 ms · 30000 / (1000 · 1001), by hand with BigInt
    expect(msToFrame(2 ** 50, rate(30_000, 1001))).toBe(Number(2n ** 50n * 30_000n / 1_001_000n))
  })

  it.each([rate(0), rate(-25), rate(25, 0), rate(29.97), rate(Number.NaN)])('refuses the rate %o', (r) => {
    expect(() => msToFrame(0, r)).toThrowError(/is not a frame rate/)
    expect(() => frameToTimecode(0, r)).toThrowError(/is not a frame rate/)
  })

  it.each([-1, 0.5, Number.NaN, Infinity])('refuses %d as a time or a frame', (n) => {
    expect(() => msToFrame(n, rate(25))).toThrowError(/whole number from 0 on/)
    expect(() => frameToMs(n, rate(25))).toThrowError(/whole number from 0 on/)
    expect(() => frameToTimecode(n, rate(25))).toThrowError(/whole number from 0 on/)
  })
})

describe('timecode', () => {
  it.each([
    [rate(25), 0, '00:00:00:00'], [rate(25), 24, '00:00:00:24'], [rate(25), 25, '00:00:01:00'], [rate(25), 90_000, '01:00:00:00'],
    [rate(24_000, 1001), 86_400, '01:00:00:00'], [rate(50), 49, '00:00:00:49'], [rate(60), 216_000, '01:00:00:00'],
    [rate(25), 25 * 3600 * 30, '30:00:00:00'], [rate(120), 119, '00:00:00:119'],
  ])('without dropping at %o, frame %d is %s', (r, frame, timecode) => {
    expect(frameToTimecode(frame, r)).toBe(timecode)
    expect(timecodeToFrame(timecode, r)).toBe(frame)
  })

  it.each([[3599, '00:00:59;59'], [3600, '00:01:00;04'], [35_964, '00:10:00;00'], [215_784, '01:00:00;00']])('dropping at 60000/1001, frame %d is %s', (frame, timecode) => {
    expect(frameToTimecode(frame, rate(60_000, 1001), { drop: true })).toBe(timecode)
    expect(timecodeToFrame(timecode, rate(60_000, 1001))).toBe(frame)
  })

  it('goes there and back', () => {
    fc.assert(fc.property(aFrame, aRate, (frame, r) => {
      const drop = canDropFrames(r)
      expect(timecodeToFrame(frameToTimecode(frame, r), r)).toBe(frame)
      if (drop) expect(timecodeToFrame(frameToTimecode(frame, r, { drop }), r)).toBe(frame)
    }))
  })

  it('knows equal fractions and where frames may be dropped', () => {
    expect(RATES.filter(canDropFrames)).toEqual([rate(30_000, 1001), rate(60_000, 1001), rate(90_000, 3003)])
    expect(() => frameToTimecode(0, rate(25), { drop: true })).toThrowError(/Drop-frame timecode exists at/)
    expect(() => timecodeToFrame('00:00:00;00', rate(24_000, 1001))).toThrowError(/Drop-frame timecode exists at/)
  })

  it.each(['', '1:2:3:4', '00:00:00', '00:60:00:00', '00:00:60:00', '00:00:00:25', 'aa:bb:cc:dd', '-00:00:00:00'])('refuses %j', (text) => {
    expect(() => timecodeToFrame(text, rate(25))).toThrowError(/is not a timecode/)
  })

  it.each(['00:01:00;00', '00:01:00;01', '00:59:00;00'])('refuses %s, a number that is dropped', (text) => {
    expect(() => timecodeToFrame(text, rate(30_000, 1001))).toThrowError(/does not exist/)
  })
})
