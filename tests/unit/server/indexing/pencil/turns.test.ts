import { describe, expect, it } from 'vitest'
import { listen } from '#server/indexing/pencil/speech'
import { hearTurns, TURN_FEATURES } from '#server/indexing/pencil/turns'
import type { SpokenClip } from '#server/indexing/pencil/types'
import { clipOf } from './support'

/** The features of the second cue of two, without what is always there. */
function heard(before: string, text: string, silenceMs = 0, more: Partial<SpokenClip> = {}): Record<string, number> {
  const turns = hearTurns(listen([{ cues: [{ startMs: 0, endMs: 4000, text: before }, { startMs: 4000 + silenceMs, endMs: 8000 + silenceMs, text }], ...more }]))
  return Object.fromEntries(TURN_FEATURES.map((name, k) => [name, turns[TURN_FEATURES.length + k]!] as const).filter(([, value]) => value))
}

describe('what speaks for a new chapter', () => {
  it.each([
    ['okay, glue next', 'okay'], ['um alright then the keel', 'okay'], ['so the keel', 'so'], ['okay so the keel', 'so'], ['next the keel', 'next'], ['now last of all the keel', 'next'], ['let\'s varnish', 'next'],
    ['while that cures', 'while'], ['here\'s the transom', 'here'], ['i\'m going to plane it', 'here'], ['because it twists', 'because'],
  ])('in “%s” is “%s”', (text, name) => expect(heard('plane it fair all along there now', text)).toHaveProperty(name, 1))

  it('is a pause, by its length', () => {
    expect(heard('so that is all of it', 'glue the keel')).not.toHaveProperty('gap')
    const gaps = [1000, 5000, 20_000, 600_000].map(ms => heard('so that is all of it', 'glue the keel', ms))
    expect(gaps.map(gap => [gap.pause ?? 0, gap.longSilence ?? 0])).toEqual([[0, 0], [1, 0], [1, 1], [1, 1]])
    expect(gaps[0]!.gap).toBeCloseTo(Math.log(2) / 2, 6)
    expect(gaps[3]!.gap).toBe(2)
  })

  it('is the end of a sentence where captions have any, and not the middle of one', () => {
    expect(heard('it fits where it should.', 'Glue the keel.')).toMatchObject({ sentence: 1 })
    expect(heard('it fits there, goes down and', 'glues well.')).toMatchObject({ midSentence: 1, dangling: 1 })
    const plain = heard('it fits there very well', 'glue the keel')
    for (const name of ['sentence', 'midSentence', 'dangling']) expect(plain).not.toHaveProperty(name)
    expect(heard('so you put it all down on the', 'keel')).toHaveProperty('dangling', 1)
    expect(heard('so you put it all down on the', 'keel', 2000)).not.toHaveProperty('dangling')
  })

  it('is a change of picture, and a sound', () => {
    expect(heard('so that is all of it', 'glue the keel', 0, { sceneChangesMs: [4100] })).toHaveProperty('scene', 1)
    const turns = hearTurns(listen([{ cues: [{ startMs: 0, endMs: 2000, text: 'so that is all of it done' }, { startMs: 2000, endMs: 4000, text: '[drilling]' }, { startMs: 4000, endMs: 6000, text: 'glue the keel' }] }]))
    expect(turns[TURN_FEATURES.length + TURN_FEATURES.indexOf('sound')]).toBe(1)
  })

  it('is new words', () => {
    expect(heard('now plane the transom', 'now plane the transom').newWords ?? 0).toBeCloseTo(0, 6)
    expect(heard('now plane the transom', 'we varnish the rails').newWords).toBe(1)
    expect(heard('so it is now', 'and there it is').newWords).toBeCloseTo(0.8, 6)
  })

  it('is nothing at the start of a clip, where a chapter starts anyway', () => {
    const turns = hearTurns(listen([clipOf(['okay so the next']), clipOf(['okay so the next'])]))
    expect([...turns].every(value => value === 0)).toBe(true)
  })
})
