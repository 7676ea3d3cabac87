import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { fateOf, followFates, type Footage } from '../../../../app/utils/upload/fates'

const footage = (clip: object = {}, track: object = {}): Footage => ({
  clips: [{ id: 'clip', state: 'working', failure: null, durationMs: null, ...clip }],
  tracks: [{ id: 'track', clipId: 'clip', read: false, failure: null, doubt: null, ...track }],
} as unknown as Footage)
const clip = { clipId: 'clip', trackId: null }
const track = { clipId: null, trackId: 'track' }

describe('what becomes of a file', () => {
  it('a clip is fine once its length is known', () => {
    expect(fateOf(clip, footage())).toBeNull()
    expect(fateOf(clip, footage({ durationMs: 1000 }))).toBe('')
    expect(fateOf(clip, footage({ state: 'failed', failure: { code: 'truncated', message: 'Cut short.' } }))).toBe('Cut short.')
    expect(fateOf({ clipId: 'gone', trackId: null }, footage())).toBe('')
  })

  it('captions are fine once read without a doubt', () => {
    expect(fateOf(track, footage())).toBeNull()
    expect(fateOf(track, footage({}, { read: true }))).toBe('')
    expect(fateOf(track, footage({}, { clipId: null }))).toBe('')
    expect(fateOf(track, footage({}, { read: true, doubt: 'Too long.' }))).toBe('Too long. Does it belong to another clip?')
    expect(fateOf(track, footage({}, { failure: 'Not captions.' }))).toBe('Not captions.')
  })
})

describe('following', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())

  it('asks once for all files of a session, outlives a lost line, tells what is wrong and ends', async () => {
    const sent = new Map([[1, { sessionId: 's', ...clip }], [2, { sessionId: 's', ...track }]])
    const answers = [null, footage(), footage({ state: 'failed', failure: { code: 'truncated', message: 'Cut short.' } }, { read: true })]
    const look = vi.fn(async () => answers.shift() ?? Promise.reject(new Error('no line')))
    const tell = vi.fn()
    const { follow } = followFates({ entry: id => sent.get(id), look, tell })
    follow(1)
    follow(2)
    await vi.advanceTimersByTimeAsync(60_000)
    expect(look).toHaveBeenCalledTimes(3)
    expect(tell.mock.calls).toEqual([[1, 'Cut short.']])
  })
})
