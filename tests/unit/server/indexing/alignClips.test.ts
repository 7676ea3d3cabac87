import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { alignClips, type ClipToAlign } from '#server/indexing/alignClips'

const clip = (id: string, values: Partial<ClipToAlign> = {}): ClipToAlign => ({ id, name: `${id}.mp4`, durationMs: 60_000, containerAt: null, handAt: null, offsetMs: 0, offsetByHand: false, placedBy: null, ...values })
const offsets = (clips: ClipToAlign[]) => Object.fromEntries(alignClips(clips).map(one => [one.id, one.offsetMs]))
const sources = (clips: ClipToAlign[]) => Object.fromEntries(alignClips(clips).map(one => [one.id, one.recordedAtSource]))

describe('laying clips on a session’s clock', () => {
  it('uses the container’s time, the earliest at 0', () => {
    const clips = [clip('b', { containerAt: '2026-09-05T08:20:00Z' }), clip('a', { containerAt: '2026-09-05T08:15:00.500Z' })]
    expect(offsets(clips)).toEqual({ a: 0, b: 299_500 })
    expect(sources(clips)).toEqual({ a: 'container', b: 'container' })
  })

  it('reads the file name where the container says nothing', () => {
    const clips = [clip('a', { name: 'VID_20260905_101502.mp4' }), clip('b', { name: 'VID_20260905_111847.mp4' })]
    expect(offsets(clips)).toEqual({ a: 0, b: 3_825_000 })
    expect(sources(clips).b).toBe('name')
  })

  it('puts clips without any time one after another by name, as people count', () => {
    const clips = [clip('ten', { name: 'clip 10.mp4' }), clip('two', { name: 'clip 2.mp4', durationMs: 30_000 }), clip('three', { name: 'clip 3.mp4' })]
    expect(offsets(clips)).toEqual({ two: 0, three: 30_000, ten: 90_000 })
    expect(sources(clips).two).toBe('order')
  })

  it('puts a clip without a time after the one before it by name, and before the one after it when it is first', () => {
    const clips = [clip('a', { name: 'a.mp4' }), clip('b', { name: 'b.mp4', containerAt: '2026-09-05T08:00:00Z' }), clip('c', { name: 'c.mp4' }), clip('d', { name: 'd.mp4', containerAt: '2026-09-05T09:00:00Z' })]
    expect(offsets(clips)).toEqual({ a: 0, b: 60_000, c: 120_000, d: 3_660_000 })
  })

  it('finds the zone of names from clips that have both times', () => {
    // Names in local summer time, two hours before UTC; the container of the first is some seconds off.
    const clips = [clip('a', { name: 'VID_20260905_101502.mp4', containerAt: '2026-09-05T08:15:09Z' }), clip('b', { name: 'VID_20260905_102500.mp4' })]
    expect(offsets(clips)).toEqual({ a: 0, b: 591_000 })
  })

  it('does not let a camera with a wrong clock make the session years long', () => {
    const clips = [clip('a', { containerAt: '2026-09-05T08:00:00Z' }), clip('b', { containerAt: '2016-01-01T00:00:00Z' }), clip('c', { containerAt: '2026-09-05T08:10:00Z' })]
    expect(offsets(clips)).toEqual({ a: 0, b: 60_000, c: 600_000 })
    expect(sources(clips).b).toBe('order')
  })

  it('believes a time given by hand, and a place given by hand even more', () => {
    const clips = [
      clip('a', { containerAt: '2026-09-05T08:00:00Z', placedBy: 'container' }),
      clip('b', { containerAt: '2016-01-01T00:00:00Z', handAt: '2026-09-05T08:05:00Z' }),
      clip('c', { containerAt: '2026-09-05T08:10:00Z', offsetByHand: true, offsetMs: 601_250, placedBy: 'container' }),
    ]
    expect(offsets(clips)).toEqual({ a: 0, b: 300_000, c: 601_250 })
  })

  it('moves clips placed by hand along when an earlier clip arrives', () => {
    const before = [
      clip('a', { containerAt: '2026-09-05T08:00:00Z', placedBy: 'container' }),
      clip('b', { containerAt: '2026-09-05T08:00:03Z', offsetByHand: true, offsetMs: 2500, placedBy: 'container' }),
    ]
    expect(offsets(before)).toEqual({ a: 0, b: 2500 })
    expect(offsets([...before, clip('z', { containerAt: '2026-09-05T07:00:00Z' })])).toEqual({ z: 0, a: 3_600_000, b: 3_602_500 })
  })

  it('moves the others along when a clip is nudged before the first', () => {
    const clips = [clip('a', { containerAt: '2026-09-05T08:00:00Z', placedBy: 'container' }), clip('b', { containerAt: '2026-09-05T08:00:03Z', offsetByHand: true, offsetMs: -1000, placedBy: 'container' })]
    expect(offsets(clips)).toEqual({ a: 1000, b: 0 })
  })

  it('comes to rest: what it answered is what it answers again, with some clip at 0', () => {
    const day = Date.parse('2026-09-05T08:00:00Z')
    const one = fc.record({ minute: fc.option(fc.integer({ min: 0, max: 600 })), byHand: fc.boolean(), at: fc.integer({ min: -100_000, max: 10_000_000 }), length: fc.integer({ min: 1, max: 900_000 }) })
    fc.assert(fc.property(fc.array(one, { minLength: 1, maxLength: 12 }), (list) => {
      const clips = list.map((entry, i) => clip(`c${i}`, { durationMs: entry.length, containerAt: entry.minute === null ? null : new Date(day + entry.minute * 60_000).toISOString(), offsetByHand: entry.byHand, offsetMs: entry.byHand ? entry.at : 0 }))
      const first = alignClips(clips)
      expect(Math.min(...first.map(place => place.offsetMs))).toBe(0)
      const again = alignClips(clips.map((before, i) => ({ ...before, offsetMs: first[i]!.offsetMs, placedBy: first[i]!.recordedAtSource })))
      expect(again).toEqual(first)
    }))
  })

  it('answers nothing for no clips', () => {
    expect(alignClips([])).toEqual([])
  })
})
