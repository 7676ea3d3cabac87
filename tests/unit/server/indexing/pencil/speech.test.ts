import { describe, expect, it } from 'vitest'
import { listen } from '#server/indexing/pencil/speech'
import { clipOf } from './support'

describe('listening to clips', () => {
  it('joins the words of all clips in one row, each with its cue and a time by its place in it', () => {
    const speech = listen([{ cues: [{ startMs: 1000, endMs: 5000, text: 'plane the transom flat' }] }, clipOf(['glue it down there', 'now clamp it down'])])
    expect(speech.words.map(word => [word.word, word.cue])).toEqual([['plane', 0], ['the', 0], ['transom', 0], ['flat', 0], ['glue', 1], ['it', 1], ['down', 1], ['there', 1], ['now', 2], ['clamp', 2], ['it', 2], ['down', 2]])
    expect(speech.words[2]!.atMs).toBe(Math.round(1000 + 4000 * 10 / 22))
    expect(speech.stems[0]).toBe('plane')
    expect(speech.words.map(word => word.stop).slice(0, 4)).toEqual([false, true, false, false])
    expect(speech.cues).toMatchObject([
      { clip: 0, from: 0, to: 4, first: true, gapMs: 1000, sound: false },
      { clip: 1, from: 4, to: 8, first: true, gapMs: 0 },
      { clip: 1, from: 8, to: 12, first: false, gapMs: 200 },
    ])
  })

  it('takes sounds in brackets, tags and empty cues as silence', () => {
    const speech = listen([{ cues: [
      { startMs: 0, endMs: 2000, text: '<v Ann>saw the <i>plank</i> [laughs]' },
      { startMs: 2000, endMs: 9000, text: '[sawing]' },
      { startMs: 9000, endMs: 9500, text: '' },
      { startMs: 10_000, endMs: 12_000, text: 'that is cut ♪ la la ♪' },
    ] }])
    expect(speech.cues.map(cue => cue.text)).toEqual(['saw the plank', 'that is cut'])
    expect(speech.cues[1]).toMatchObject({ gapMs: 8000, sound: true, first: false })
  })

  it('counts no silence below nought where cues lie over one another', () => {
    const speech = listen([{ cues: [{ startMs: 0, endMs: 8000, text: 'a long one of these' }, { startMs: 1000, endMs: 2000, text: 'one within it here' }, { startMs: 9000, endMs: 9900, text: 'and after both of them' }] }])
    expect(speech.cues.map(cue => cue.gapMs)).toEqual([0, 0, 1000])
  })

  it('knows talk of other days from talk of the work in hand', () => {
    const speech = listen([clipOf(['we glued the keel last week', 'now plane this edge', 'you saw the stem being bent'])])
    expect(speech.cues.map(cue => speech.words[cue.from]!.present)).toEqual([0, 1, 0])
  })

  it('hears whether captions carry full stops', () => {
    expect(listen([clipOf(['this is it.', 'and that', 'and those'])]).punctuated).toBe(true)
    expect(listen([clipOf(Array.from({ length: 30 }, (_, i) => i ? 'no full stops here' : 'one of them alone.'))]).punctuated).toBe(false)
    expect(listen([]).punctuated).toBe(false)
  })

  it('sees the picture change in the silence before a cue, not at the start of a clip nor within one', () => {
    const clip = { ...clipOf(['first words of it', 'second words of it', 'third words of it'], { everyMs: 10_000 }), sceneChangesMs: [100, 15_000, 20_500] }
    expect(listen([clip]).cues.map(cue => cue.scene)).toEqual([false, false, true])
  })
})
