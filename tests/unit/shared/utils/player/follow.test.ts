import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { placeClips } from '#shared/utils/ribband/clock'
import { frameFrom, framesOn, lastMs, moved, placeAfter, placeBefore, seekSeconds, shuttleSpeed } from '#shared/utils/player/follow'
import { whyNotPlayable } from '#shared/utils/player/reasons'
import { frameToMs, msToFrame } from '#shared/utils/timecode'

const clip = (id: string, offsetMs: number, durationMs: number, more: { camera?: string, src?: string | null } = {}) => ({ id, offsetMs, durationMs, camera: '', src: '/v', ...more })
const place = (...clips: ReturnType<typeof clip>[]) => placeClips(clips).clips
const of = <P extends { id: string }>(clips: P[], id: string) => clips.find(one => one.id === id)!

describe('playing on', () => {
  it('skips the gap to the next clip', () => {
    const clips = place(clip('a', 0, 1000), clip('b', 60_000, 1000))
    expect(placeAfter(clips, of(clips, 'a'))).toMatchObject({ clip: { id: 'b' }, ms: 0 })
    expect(placeAfter(clips, of(clips, 'b'))).toBeNull()
  })
  it('goes to another camera that is still running, at the same time', () => {
    const clips = place(clip('a', 0, 5000, { camera: 'one' }), clip('b', 2000, 9000, { camera: 'two' }), clip('c', 20_000, 1000, { camera: 'one' }))
    expect(placeAfter(clips, of(clips, 'a'))).toMatchObject({ clip: { id: 'b' }, ms: 3000 })
    expect(placeAfter(clips, of(clips, 'b'))).toMatchObject({ clip: { id: 'c' }, ms: 0 })
  })
  it('passes over clips that cannot be played yet', () => {
    const clips = place(clip('a', 0, 1000), clip('b', 2000, 1000, { src: null }), clip('c', 4000, 1000))
    expect(placeAfter(clips, of(clips, 'a'))?.clip.id).toBe('c')
    expect(placeBefore(clips, of(clips, 'c'))).toMatchObject({ clip: { id: 'a' }, ms: 999 })
  })
  it('reaches every playable clip once and ends', () => {
    fc.assert(fc.property(fc.array(fc.record({ offsetMs: fc.nat(100_000), durationMs: fc.integer({ min: 1, max: 40_000 }) }), { minLength: 1, maxLength: 8 }), (list) => {
      const clips = place(...list.map((one, n) => clip(String(n), one.offsetMs, one.durationMs, { camera: String(n % 3) })))
      let at = { clip: clips[0]!, ms: 0 }
      for (let n = 0; n <= clips.length; n++) {
        const next = placeAfter(clips, at.clip)
        if (!next) return
        expect(next.clip.endMs).toBeGreaterThan(at.clip.endMs)
        expect(next.ms).toBeGreaterThanOrEqual(0)
        expect(next.ms).toBeLessThanOrEqual(lastMs(next.clip))
        at = next
      }
      expect.fail('playing never ends')
    }))
  })
})

describe('stepping', () => {
  const clips = place(clip('a', 0, 10_000), clip('b', 3_600_000, 10_000))
  it('by seconds goes over a gap both ways and stops at the ends', () => {
    expect(moved(clips, { clip: of(clips, 'a'), ms: 9500 }, 1000)).toMatchObject({ clip: { id: 'b' }, ms: 0 })
    expect(moved(clips, { clip: of(clips, 'b'), ms: 500 }, -1000)).toMatchObject({ clip: { id: 'a' }, ms: 9999 })
    expect(moved(clips, { clip: of(clips, 'a'), ms: 500 }, -1000)).toMatchObject({ clip: { id: 'a' }, ms: 0 })
    expect(moved(clips, { clip: of(clips, 'b'), ms: 9500 }, 1000)).toMatchObject({ clip: { id: 'b' }, ms: 9999 })
  })
  it('by frames goes exactly one on and comes back, at 30000/1001', () => {
    const rate = { numerator: 30_000, denominator: 1001 }
    const exact = { num: 30_000, den: 1001 }
    fc.assert(fc.property(fc.nat(36_000_000), (ms) => {
      const frame = msToFrame(ms, exact)
      const next = framesOn(ms, 1, rate)
      expect(msToFrame(next, exact)).toBe(frame + 1)
      expect(msToFrame(framesOn(next, -1, rate), exact)).toBe(frame)
    }))
    expect(framesOn(0, -1, rate)).toBe(0)
  })
  it('begins with the first frame that begins at the time or after it', () => {
    const ten = { numerator: 10, denominator: 1 }
    expect([0, 1, 99, 100, 101, 12_345].map(ms => frameFrom(ms, ten))).toEqual([0, 100, 100, 100, 200, 12_400])
    expect(frameFrom(12_345, null)).toBe(12_345)
    const rate = { numerator: 30_000, denominator: 1001 }
    const exact = { num: 30_000, den: 1001 }
    fc.assert(fc.property(fc.nat(36_000_000), (ms) => {
      const from = frameFrom(ms, rate)
      expect(from).toBeGreaterThanOrEqual(ms)
      expect(from - ms).toBeLessThan(34)
      // It is where its frame begins, and going there again stays there.
      expect(frameToMs(msToFrame(from, exact), exact)).toBe(from)
      expect(frameFrom(from, rate)).toBe(from)
    }))
  })
  it('seeks within the millisecond, so never to the frame before', () => {
    expect(seekSeconds(40)).toBe(0.0405)
  })
})

describe('shuttle', () => {
  it('goes faster with each press and turns round through 1×', () => {
    expect([0, 1, 2, 4, 8].map(speed => shuttleSpeed(speed, 1))).toEqual([1, 2, 4, 8, 8])
    expect([0, -1, -2, -8].map(speed => shuttleSpeed(speed, -1))).toEqual([-1, -2, -4, -8])
    expect(shuttleSpeed(4, -1)).toBe(-1)
    expect(shuttleSpeed(-4, 1)).toBe(1)
    expect(shuttleSpeed(1.5, 1)).toBe(2)
  })
})

describe('why a clip cannot be played', () => {
  const base = { state: 'working' as const, src: null, failure: null, tasks: [] }
  it('says nothing when it can', () => {
    expect(whyNotPlayable({ ...base, state: 'ready', src: '/v' })).toBeNull()
  })
  it('tells of the copy in the making and how far it is', () => {
    const why = whyNotPlayable({ ...base, tasks: [{ task: 'make-proxy', state: 'working', progress: 0.43, message: '' }] })
    expect(why).toMatchObject({ progress: 0.43 })
    expect(why!.words).toContain('copy for watching')
  })
  it('gives the failure in its own words, and the browser’s fault for a file it refuses', () => {
    expect(whyNotPlayable({ ...base, state: 'failed', failure: { code: 'truncated', message: 'It ends too early.' } })?.words).toBe('It ends too early.')
    expect(whyNotPlayable({ ...base, state: 'ready', src: '/v' }, 'No.')?.words).toBe('No.')
  })
})
