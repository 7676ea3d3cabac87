import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { clipAt, nearestClip, placeClips, toClip, toSession } from '#shared/utils/ribband/clock'

const clip = (id: string, offsetMs: number, durationMs: number | null, camera = 'Phone') => ({ id, offsetMs, durationMs, camera })
const lanesOf = (clips: ReturnType<typeof clip>[]) => Object.fromEntries(placeClips(clips).clips.map(placed => [placed.id, placed.lane]))

describe('placeClips', () => {
  it('lays clips of one camera in one band, in order', () => {
    const placement = placeClips([clip('b', 5000, 1000), clip('a', 0, 4000)])
    expect(placement.clips.map(placed => [placed.id, placed.startMs, placed.endMs, placed.lane])).toEqual([['a', 0, 4000, 0], ['b', 5000, 6000, 0]])
    expect([placement.startMs, placement.endMs]).toEqual([0, 6000])
  })

  it('gives a camera that overlaps another its own band, all of its clips together', () => {
    expect(lanesOf([clip('a', 0, 10_000), clip('o1', 3000, 2000, 'Overhead'), clip('o2', 20_000, 2000, 'Overhead')])).toEqual({ a: 0, o1: 1, o2: 1 })
  })

  it('lets cameras that never overlap share a band and says whose it is', () => {
    const placement = placeClips([clip('a', 0, 1000), clip('b', 2000, 1000, 'Overhead')])
    expect(placement.lanes).toEqual([{ cameras: ['Phone', 'Overhead'] }])
  })

  it('opens no band for clips of one camera that overlap by less than a second', () => {
    expect(lanesOf([clip('a', 0, 10_400), clip('b', 10_000, 5000)])).toEqual({ a: 0, b: 0 })
    expect(lanesOf([clip('a', 0, 12_000), clip('b', 10_000, 5000)])).toEqual({ a: 0, b: 1 })
  })

  it('leaves out clips whose length is not known', () => {
    expect(placeClips([clip('a', 0, null), clip('b', 0, 0)])).toEqual({ clips: [], lanes: [], startMs: 0, endMs: 0 })
  })

  it('never lays two cameras over one another', () => {
    const clips = fc.array(fc.record({ id: fc.uuid(), offsetMs: fc.integer({ min: 0, max: 100_000 }), durationMs: fc.integer({ min: 1, max: 30_000 }), camera: fc.constantFrom('A', 'B', 'C') }), { maxLength: 12 })
    fc.assert(fc.property(clips, (input) => {
      const { clips: placed, lanes } = placeClips(input)
      expect(placed).toHaveLength(input.length)
      for (const a of placed) {
        expect(lanes[a.lane]!.cameras).toContain(a.clip.camera)
        for (const b of placed) {
          if (a === b || a.lane !== b.lane) continue
          expect(Math.min(a.endMs, b.endMs) - Math.max(a.startMs, b.startMs)).toBeLessThan(a.clip.camera === b.clip.camera ? 1000 : 1)
        }
      }
    }))
  })
})

describe('the clocks', () => {
  it('are each other’s inverse inside a clip', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 1e8 }), fc.integer({ min: 1, max: 1e7 }), fc.double({ min: 0, max: 1, noNaN: true }), (offsetMs, durationMs, share) => {
      const placed = placeClips([clip('a', offsetMs, durationMs)]).clips[0]!
      const ms = Math.floor(durationMs * share)
      expect(toClip(placed, toSession(placed, ms))).toBe(ms)
    }))
  })

  it('hold a time outside the clip at its edge', () => {
    const placed = placeClips([clip('a', 1000, 500)]).clips[0]!
    expect([toClip(placed, 0), toClip(placed, 9999)]).toEqual([0, 500])
  })
})

describe('clipAt', () => {
  const { clips } = placeClips([clip('a', 0, 10_000), clip('o', 4000, 2000, 'Overhead'), clip('b', 20_000, 1000)])
  it('prefers the band asked for, else the uppermost', () => {
    expect(clipAt(clips, 5000)?.id).toBe('a')
    expect(clipAt(clips, 5000, 1)?.id).toBe('o')
    expect(clipAt(clips, 1000, 1)?.id).toBe('a')
  })

  it('ends a clip before its end, and is null between clips', () => {
    expect(clipAt(clips, 9999)?.id).toBe('a')
    expect(clipAt(clips, 10_000)).toBeNull()
  })

  it('finds the nearest from a gap', () => {
    expect(nearestClip(clips, 12_000)?.id).toBe('a')
    expect(nearestClip(clips, 19_000)?.id).toBe('b')
    expect(nearestClip([], 5)).toBeNull()
  })
})
