import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { layLine } from '#shared/utils/ribband/line'
import { clockStep, finerStep, FINEST_MS_PER_PX, fromX, holdView, MARGIN_PX, panBy, reveal, scaleWords, showRange, ticks, toX, viewEnd, wholeScale, wholeView, zoomAt } from '#shared/utils/ribband/scale'

const HOUR = 3_600_000
const view = fc.record({ startMs: fc.double({ min: 0, max: 6 * HOUR, noNaN: true }), msPerPx: fc.double({ min: 1, max: 20_000, noNaN: true }), widthPx: fc.integer({ min: 200, max: 2000 }) })

describe('a view', () => {
  it('of the whole has both ends in sight with bare floor beside them', () => {
    const whole = wholeView(6 * HOUR, 1300)
    expect(toX(whole, 0)).toBeCloseTo(MARGIN_PX)
    expect(toX(whole, 6 * HOUR)).toBeCloseTo(1300 - MARGIN_PX)
  })

  it('stays between full size and the whole, and on the line', () => {
    fc.assert(fc.property(view, fc.integer({ min: 1000, max: 6 * HOUR }), (given, length) => {
      const held = holdView(given, length)
      expect(held.msPerPx).toBeGreaterThanOrEqual(FINEST_MS_PER_PX)
      expect(held.msPerPx).toBeLessThanOrEqual(wholeScale(length, held.widthPx))
      expect(held.startMs).toBeGreaterThanOrEqual(-MARGIN_PX * held.msPerPx - 1e-6)
      expect(toX(held, 0)).toBeLessThanOrEqual(MARGIN_PX + 1e-6)
    }))
  })

  it('zooms about the pointer as long as an end does not hold it', () => {
    const start = holdView({ startMs: HOUR, msPerPx: 400, widthPx: 1000 }, 6 * HOUR)
    fc.assert(fc.property(fc.double({ min: 1, max: 100, noNaN: true }), fc.integer({ min: 0, max: 1000 }), (factor, x) => {
      expect(fromX(zoomAt(start, factor, x, 6 * HOUR), x)).toBeCloseTo(fromX(start, x), 3)
    }))
  })

  it('does not pan past the ends', () => {
    const close = holdView({ startMs: 0, msPerPx: 10, widthPx: 1000 }, HOUR)
    expect(panBy(close, -1e9, HOUR).startMs).toBe(-MARGIN_PX * 10)
    expect(viewEnd(panBy(close, 1e9, HOUR))).toBeCloseTo(HOUR + MARGIN_PX * 10)
  })

  it('shows a range whole', () => {
    const shown = showRange(wholeView(HOUR, 1000), 600_000, 660_000, HOUR)
    expect(toX(shown, 600_000)).toBeGreaterThan(0)
    expect(toX(shown, 660_000)).toBeLessThan(1000)
    expect(toX(shown, 660_000) - toX(shown, 600_000)).toBeGreaterThan(800)
  })

  it('moves no further than needed to reveal a place', () => {
    const close = holdView({ startMs: 100_000, msPerPx: 10, widthPx: 1000 }, HOUR)
    expect(reveal(close, 105_000, HOUR)).toBe(close)
    expect(toX(reveal(close, 111_000, HOUR), 111_000)).toBeCloseTo(1000 - 48)
    expect(toX(reveal(close, 2_000_000, HOUR), 2_000_000)).toBeCloseTo(500)
  })
})

describe('clock steps', () => {
  it('are the smallest whose labels have room', () => {
    expect(clockStep(wholeScale(6 * HOUR, 1300), 84)).toBe(30 * 60_000)
    expect(clockStep(1.4, 84)).toBe(200)
    expect(clockStep(1e9, 84)).toBe(24 * HOUR)
  })

  it('are divided evenly by finer ones', () => {
    fc.assert(fc.property(fc.double({ min: 1, max: 1e5, noNaN: true }), (msPerPx) => {
      const step = clockStep(msPerPx, 84)
      const finer = finerStep(step, msPerPx, 14)
      if (finer !== null) expect(step % finer).toBe(0)
    }))
  })
})

describe('ticks', () => {
  const line = layLine([{ startMs: 0, endMs: 25_000 }, { startMs: 101_000, endMs: 131_000 }])
  it('stand at multiples of the session’s clock, each on its stretch of the line', () => {
    expect(ticks(line, { startMs: 0, msPerPx: 100, widthPx: 1000 }, 10_000)).toEqual([
      { sessionMs: 0, lineMs: 0 }, { sessionMs: 10_000, lineMs: 10_000 }, { sessionMs: 20_000, lineMs: 20_000 },
      { sessionMs: 110_000, lineMs: 34_000 }, { sessionMs: 120_000, lineMs: 44_000 }, { sessionMs: 130_000, lineMs: 54_000 },
    ])
  })

  it('are only those in sight', () => {
    expect(ticks(line, { startMs: 30_000, msPerPx: 10, widthPx: 1000 }, 10_000).map(tick => tick.sessionMs)).toEqual([110_000])
  })
})

it('scaleWords says how much is in sight', () => {
  expect([4, 45, 720, 6.2 * 3600].map(seconds => scaleWords({ startMs: 0, msPerPx: seconds, widthPx: 1000 }))).toEqual(['4.0 s in sight', '45 s in sight', '12 min in sight', '6.2 h in sight'])
})
