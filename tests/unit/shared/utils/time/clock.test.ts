import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { formatClock, formatSeconds, formatTimeFragment, parseClock, parseTimeFragment } from '#shared/utils/timecode'

describe('formatClock', () => {
  it.each([[0, '0:00'], [999, '0:00'], [5000, '0:05'], [245_000, '4:05'], [3_599_999, '59:59'], [3_723_000, '1:02:03'], [360_000_000, '100:00:00'], [-1500, '−0:01'], [Number.NaN, '–']])('%d is %s', (ms, text) => {
    expect(formatClock(ms)).toBe(text)
  })

  it('shows tenths when asked, rounded down', () => {
    expect(formatClock(245_399, { tenths: true })).toBe('4:05.3')
    expect(formatClock(999, { tenths: true })).toBe('0:00.9')
  })
})

describe('parseClock', () => {
  it.each<[string, number | null]>([
    ['1:02:03', 3_723_000], ['4:05', 245_000], ['0:00', 0], ['75:00', 4_500_000], ['1:02:03.5', 3_723_500], ['95', 95_000], ['95.5', 95_500], ['95,5', 95_500], ['95s', 95_000],
    ['1h2m3s', 3_723_000], ['2m', 120_000], ['1h', 3_600_000], ['1 h 30 m', 5_400_000], ['90m', 5_400_000], ['3.25s', 3250], ['1.0005', 1001], ['1.005', 1005], ['1.99999', 2000], [' 12 ', 12_000], ['1H2M', 3_720_000],
    ['', null], ['h', null], ['1:60', null], ['1:2', null], ['1:99:00', null], ['-5', null], ['1h2', null], ['3s2m', null], ['five', null], ['1:02:03:04', null], ['1e3', null], ['Infinity', null], ['9'.repeat(50), null],
  ])('%j is %s', (text, ms) => {
    expect(parseClock(text)).toBe(ms)
  })

  it('reads what formatClock writes', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 400 * 3600 }), seconds => parseClock(formatClock(seconds * 1000)) === seconds * 1000))
  })
})

describe('media fragments', () => {
  it.each<[string, ReturnType<typeof parseTimeFragment>]>([
    ['t=12.5', { startMs: 12_500 }],
    ['#t=12.5', { startMs: 12_500 }],
    ['t=npt:10,20', { startMs: 10_000, endMs: 20_000 }],
    ['t=npt:,20', { startMs: 0, endMs: 20_000 }],
    ['t=,20', { startMs: 0, endMs: 20_000 }],
    ['t=10s,20.25s', { startMs: 10_000, endMs: 20_250 }],
    ['t=0:02:00,121.5', { startMs: 120_000, endMs: 121_500 }],
    ['t=02:00', { startMs: 120_000 }],
    ['t=10.', { startMs: 10_000 }],
    ['t=npt%3A10', { startMs: 10_000 }],
    ['%74=10%2C20', { startMs: 10_000, endMs: 20_000 }],
    ['track=a&t=10&xywh=0,0,1,1', { startMs: 10_000 }],
    ['t=10&t=20', { startMs: 20_000 }],
    ['t=10,', null], ['t=', null], ['t=,', null], ['t=20,10', null], ['t=10,10', null], ['t=a', null], ['t=-1', null], ['t=1,2,3', null],
    ['t=smpte:00:00:10', null], ['t=clock:2026-03-14T10:00:00Z', null], ['t=1:60:00', null], ['t=2:00', null], ['t=%', null], ['T=10', null], ['', null], ['x', null],
  ])('%j', (fragment, expected) => {
    expect(parseTimeFragment(fragment)).toEqual(expected)
  })

  it('are written in seconds, as short as exact', () => {
    expect(formatTimeFragment({ startMs: 12_500 })).toBe('t=12.5')
    expect(formatTimeFragment({ startMs: 0, endMs: 20_007 })).toBe('t=0,20.007')
    expect(formatSeconds(100_000)).toBe('100')
    expect(formatSeconds(-5)).toBe('0')
  })

  it('read back as written', () => {
    const time = fc.integer({ min: 0, max: 100 * 3_600_000 })
    fc.assert(fc.property(time, time, (startMs, length) => {
      expect(parseTimeFragment(formatTimeFragment({ startMs }))).toEqual({ startMs })
      const range = { startMs, endMs: startMs + length + 1 }
      expect(parseTimeFragment(formatTimeFragment(range))).toEqual(range)
    }))
  })
})
