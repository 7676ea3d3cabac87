import { describe, expect, it } from 'vitest'
import { checkAgainstClip, cuesForStorage, orderCues } from '#server/indexing/captions/order'
import type { Cue } from '#shared/types/captions'
import { read } from './support'

const cue = (text: string, startMs: number, endMs: number): Cue => ({ id: '', startMs, endMs, text })
const texts = (cues: Cue[]) => cues.map(one => one.text).join('')

describe('orderCues', () => {
  it('orders by start, the longer first, then as in the file, and leaves its argument alone', () => {
    const given = [cue('d', 2000, 3000), cue('b', 1000, 2000), cue('a', 1000, 4000), cue('c', 1000, 2000)]
    expect(texts(orderCues(given))).toBe('abcd')
    expect(texts(given)).toBe('dbac')
  })
})

describe('cuesForStorage', () => {
  it('never ends before it starts and fits four bytes', () => {
    expect(cuesForStorage([cue('a', 2000, 1000), cue('b', Number.MAX_SAFE_INTEGER, 0)])).toEqual([cue('a', 2000, 2000), cue('b', 2_147_483_647, 2_147_483_647)])
  })
})

describe('checkAgainstClip', () => {
  it.each([
    [10_000, null],
    [8000, null],
    [7999, 'The captions run 2 s longer than the clip.'],
    [1000, 'The captions run 9 s longer than the clip. 1 caption starts after its end and will not be seen.'],
    [0, 'The captions run 10 s longer than the clip. 2 captions start after its end and will not be seen.'],
  ])('with a clip of %d ms', (duration, doubt) => {
    expect(checkAgainstClip([cue('a', 0, 1000), cue('b', 4000, 10_000)], duration)).toBe(doubt)
  })

  it('counts minutes and hours', () => {
    expect(checkAgainstClip([cue('a', 0, 190_000)], 0)).toMatch(/run 3 min 10 s longer/)
    expect(checkAgainstClip([cue('a', 0, 7_320_000)], 0)).toMatch(/run 2 h 2 min longer/)
    expect(checkAgainstClip([cue('a', 0, 7_200_000)], 0)).toMatch(/run 2 h longer/)
  })

  it('has nothing to say about no captions', () => {
    expect(checkAgainstClip([], 0)).toBeNull()
  })
})

describe('warnings about times', () => {
  it('name captions out of order, overlapping and without length', () => {
    const file = 'WEBVTT\n\n00:10.000 --> 00:12.000\na\n\n00:01.000 --> 00:03.000\nb\n\n00:02.500 --> 00:04.000\nc\n\n00:20.000 --> 00:20.000\nd\n\n00:31.000 --> 00:30.000\ne'
    expect(read(file).warnings).toEqual([
      'The caption at 0:01.0 comes after a later one in the file. It was put in order by its time.',
      'The caption at 0:02.5 comes after a later one in the file. It was put in order by its time.',
      'The caption at 0:20.0 lasts no time, so no player shows it. It was kept.',
      'The caption at 0:31.0 ends before it starts, so no player shows it. It was kept.',
      'The caption at 0:02.5 starts before the one at 0:01.0 has ended. Both were kept.',
    ])
  })
})
