import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { evenCues } from '#server/indexing/pencil/evenCues'
import { clipOf } from './support'

const words = (cues: readonly { text: string }[]) => cues.map(cue => cue.text).join(' ').split(/\s+/).filter(Boolean)

describe('evening out captions', () => {
  it('leaves ordinary ones as they are', () => {
    const { cues } = clipOf(['plane the edge of it', 'and offer it up again'])
    expect(evenCues(cues)).toEqual(cues)
    expect(evenCues([])).toEqual([])
  })
  it('joins captions of single words to lines, not over pauses, sentence ends or sounds', () => {
    const { cues } = clipOf('one two three. four five [saw] six'.split(' '), { everyMs: 500 })
    cues.at(-1)!.startMs += 2000
    cues.at(-1)!.endMs += 2000
    expect(evenCues(cues).map(({ startMs, endMs, text }) => [startMs, endMs, text])).toEqual([[0, 1300, 'one two three.'], [1500, 2300, 'four five'], [2500, 2800, '[saw]'], [5000, 5300, 'six']])
  })
  it('parts whole paragraphs into phrases that lie end to end', () => {
    const text = 'plane the edge of the transom until it is fair and smooth. okay next we glue the frames to the sides and clamp them overnight'
    const pieces = evenCues([{ startMs: 0, endMs: 20_000, text }])
    expect(pieces.length).toBeGreaterThan(2)
    expect(pieces[0]!.startMs).toBe(0)
    expect(pieces.at(-1)!.endMs).toBe(20_000)
    pieces.slice(1).forEach((piece, i) => expect(piece.startMs).toBe(pieces[i]!.endMs))
  })
  it('loses no word and keeps their order, whatever it is given', () => {
    const word = fc.constantFrom('a', 'so', 'okay', 'transom.', 'glue', '[Music]', 'and', 'why?')
    fc.assert(fc.property(fc.array(fc.array(word, { maxLength: 30 }), { maxLength: 8 }), (texts) => {
      const { cues } = clipOf(texts.map(text => text.join(' ')), { everyMs: 3000 })
      const even = evenCues(cues)
      expect(words(even)).toEqual(words(cues))
      even.slice(1).forEach((cue, i) => expect(cue.startMs).toBeGreaterThanOrEqual(even[i]!.startMs))
      for (const cue of even) expect(cue.endMs).toBeGreaterThanOrEqual(cue.startMs)
    }))
  })
})
