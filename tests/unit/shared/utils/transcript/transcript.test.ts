import { describe, expect, it } from 'vitest'
import type { ChapterView, CueView, TrackView } from '#shared/types/session'
import { placeClips } from '#shared/utils/ribband/clock'
import { cuesIn, findRows, languagesOf, layTranscript, nextFound, rowAt } from '#shared/utils/transcript/rows'
import { spokenRange } from '#shared/utils/transcript/selection'

const clips = placeClips([
  { id: 'late', durationMs: 20_000, offsetMs: 100_000, camera: '' },
  { id: 'early', durationMs: 20_000, offsetMs: 0, camera: '' },
]).clips
const cue = (id: string, clipId: string, startMs: number, endMs: number, text = id, trackId = 't'): CueView => ({ id, trackId, clipId, startMs, endMs, text, edited: false, original: null, version: 1 })
const chapter = (id: string, clipId: string, startMs: number, endMs: number) => ({ id, clipId, startMs, endMs }) as ChapterView
const cues = [cue('d', 'late', 0, 2000, 'and clamp it'), cue('b', 'early', 2000, 4000, 'Mix the epoxy'), cue('a', 'early', 0, 2000, 'Good morning'), cue('c', 'early', 4000, 6000, 'and spread the\nepoxy thinly')]
const rows = layTranscript(clips, cues, [chapter('x', 'early', 1900, 5200)])

describe('rows', () => {
  it('stand clip after clip, each by time, on the session’s clock', () => {
    expect(rows.map(row => [row.cue.id, row.startMs, row.opensClip])).toEqual([['a', 0, true], ['b', 2000, false], ['c', 4000, false], ['d', 100_000, true]])
  })
  it('know the chapter that the middle of a caption lies in', () => {
    expect(rows.map(row => [row.chapter?.id ?? null, row.opensChapter])).toEqual([[null, false], ['x', true], ['x', false], [null, false]])
  })
  it('are found by time: the one being said, else the last one said', () => {
    expect([-1, 0, 2500, 19_000].map(ms => rowAt(rows, 'early', ms))).toEqual([-1, 0, 1, 2])
    expect(rowAt(rows, 'late', 500)).toBe(3)
    expect(rowAt(rows, 'none', 500)).toBe(-1)
  })
  it('are found by words across line ends', () => {
    expect(findRows(rows, 'EPOXY')).toEqual([1, 2])
    expect(findRows(rows, 'the epoxy')).toEqual([1, 2])
    expect(findRows(rows, ' ')).toEqual([])
  })
  it('are gone to in turn: first the one shown, then round and round, either way', () => {
    expect(nextFound(3, 1, 1, false)).toBe(1)
    expect([nextFound(3, 1, 1, true), nextFound(3, 2, 1, true)]).toEqual([2, 0])
    expect([nextFound(3, 1, -1, false), nextFound(3, 0, -1, true)]).toEqual([0, 2])
    expect(nextFound(0, -1, 1, false)).toBeNull()
  })
})

describe('languages', () => {
  const track = (id: string, clipId: string, language: string, cueCount: number) => ({ id, clipId, language, cueCount }) as TrackView
  const tracks = [track('en1', 'early', 'en', 3), track('fr1', 'early', 'fr', 3), track('en2', 'late', 'en', 3)]
  it('come with the most captions first', () => {
    expect(languagesOf(tracks)).toEqual(['en', 'fr'])
  })
  it('show each clip once, in what it has', () => {
    const both = [cue('1', 'early', 0, 1, 'one', 'en1'), cue('2', 'early', 0, 1, 'un', 'fr1'), cue('3', 'late', 0, 1, 'two', 'en2')]
    expect(cuesIn('fr', both, tracks).map(one => one.text)).toEqual(['un', 'two'])
    expect(cuesIn('en', both, tracks).map(one => one.text)).toEqual(['one', 'two'])
  })
})

describe('words selected', () => {
  it('take whole captions from first to last letter', () => {
    expect(spokenRange(rows, { index: 1, offset: 0 }, { index: 2, offset: 999 })).toEqual({ clipId: 'early', startMs: 2000, endMs: 6000, cut: false })
  })
  it('within a caption are placed by their share of its letters, whichever way they were drawn', () => {
    const half = { index: 0, offset: 6 }
    expect(spokenRange(rows, half, { index: 0, offset: 12 })).toEqual({ clipId: 'early', startMs: 1000, endMs: 2000, cut: false })
    expect(spokenRange(rows, { index: 0, offset: 12 }, half)).toEqual({ clipId: 'early', startMs: 1000, endMs: 2000, cut: false })
  })
  it('end with the clip they began in', () => {
    expect(spokenRange(rows, { index: 2, offset: 0 }, { index: 3, offset: 3 })).toEqual({ clipId: 'early', startMs: 4000, endMs: 6000, cut: true })
  })
  it('of no length are nothing', () => {
    expect(spokenRange(rows, { index: 1, offset: 3 }, { index: 1, offset: 3 })).toBeNull()
    expect(spokenRange(rows, { index: 9, offset: 3 }, { index: 10, offset: 3 })).toBeNull()
  })
})
