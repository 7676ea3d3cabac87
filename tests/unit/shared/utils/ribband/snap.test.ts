import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { snap, snapPoints, SNAP_KINDS } from '#shared/utils/ribband/snap'

const clip = { id: 'c', durationMs: 60_000, sceneChangesMs: [20_000], silences: [{ startMs: 30_000, endMs: 32_000 }] }
const chapter = (id: string, startMs: number, endMs: number, clipId = 'c') => ({ id, clipId, startMs, endMs })

describe('snapPoints', () => {
  const chapters = [chapter('a', 0, 10_000), chapter('b', 10_000, 20_000), chapter('other', 5, 6, 'elsewhere')]
  const points = snapPoints(clip, [{ clipId: 'c', startMs: 10_000, endMs: 12_500 }, { clipId: 'elsewhere', startMs: 1, endMs: 2 }], chapters, { except: 'b', playheadMs: 41_000.4 })

  it('gathers what is worth meeting on this clip, in order', () => {
    expect(points.map(point => `${point.ms} ${point.kind}`)).toEqual([
      '0 neighbour', '10000 neighbour', '12500 cue-end', '20000 scene', '30000 silence', '32000 silence', '41000 playhead', '60000 clip',
    ])
  })

  it('does not snap a chapter to itself', () => {
    expect(snapPoints(clip, [], [chapter('only', 1234, 5678)], { except: 'only' }).map(point => point.ms)).not.toContain(1234)
  })

  it('does not hold an edge where its neighbour meets it and moves along', () => {
    const kinds = (butt?: number) => snapPoints(clip, [], chapters, { except: 'b', butt }).map(point => point.ms)
    expect(kinds()).toContain(10_000)
    expect(kinds(10_000)).not.toContain(10_000)
  })

  it('leaves out what lies beyond the clip', () => {
    expect(snapPoints(clip, [{ clipId: 'c', startMs: 59_000, endMs: 61_000 }], []).at(-1)!.ms).toBe(60_000)
  })
})

describe('snap', () => {
  const points = [{ ms: 1000, kind: 'cue-start' as const }, { ms: 1100, kind: 'scene' as const }]
  it('takes the nearest within reach', () => {
    expect(snap(1060, points, 100)).toEqual({ ms: 1100, point: points[1] })
    expect(snap(1040, points, 100)).toEqual({ ms: 1000, point: points[0] })
  })

  it('rounds to a whole millisecond where nothing is near', () => {
    expect(snap(500.4, points, 100)).toEqual({ ms: 500, point: null })
  })

  it('passes over points beyond the limits', () => {
    expect(snap(1090, points, 100, { min: 0, max: 1050 })).toEqual({ ms: 1000, point: points[0] })
    expect(snap(1190, points, 50, { min: 0, max: 1050 })).toEqual({ ms: 1050, point: null })
  })

  it('never leaves the limits nor moves further than the tolerance inside them', () => {
    const anyPoints = fc.array(fc.record({ ms: fc.nat(10_000), kind: fc.constantFrom(...SNAP_KINDS) })).map(list => list.sort((a, b) => a.ms - b.ms))
    fc.assert(fc.property(anyPoints, fc.double({ min: -500, max: 10_500, noNaN: true }), fc.nat(500), fc.nat(10_000), fc.nat(10_000), (list, at, tolerance, a, b) => {
      const limits = { min: Math.min(a, b), max: Math.max(a, b) }
      const { ms } = snap(at, list, tolerance, limits)
      expect(ms).toBeGreaterThanOrEqual(limits.min)
      expect(ms).toBeLessThanOrEqual(limits.max)
      if (at >= limits.min && at <= limits.max) expect(Math.abs(ms - at)).toBeLessThanOrEqual(Math.max(tolerance, 0.5))
    }))
  })
})
