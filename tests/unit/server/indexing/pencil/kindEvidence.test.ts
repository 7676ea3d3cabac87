import { describe, expect, it } from 'vitest'
import { HEARD_COLUMNS, hearKinds } from '#server/indexing/pencil/kindEvidence'
import { listen } from '#server/indexing/pencil/speech'
import { clipOf } from './support'

const C = HEARD_COLUMNS.length
const most = (text: string) => {
  const row = hearKinds(listen([clipOf([text])]))
  return HEARD_COLUMNS[row.indexOf(Math.max(...row))]
}
const amount = (texts: string[], kind: typeof HEARD_COLUMNS[number], cue: number, everyMs = 4000) => hearKinds(listen([clipOf(texts, { everyMs })]))[cue * C + HEARD_COLUMNS.indexOf(kind)]!

describe('how much of each operation’s talk is in a cue', () => {
  it.each([
    ['drill a pilot hole with this bit', 'drill'], ['saw along the kerf with the jigsaw', 'cut'], ['varnish it with a badger brush', 'paint'], ['welcome back everybody, thanks for watching', 'none'],
    ['sweep the floor and tidy up', 'clean-up'], ['the plans call for it, that is the reason', 'plan-talk'], ['mark it out with a pencil and dividers', 'mark-out'],
  ])('%s: mostly %s', (text, kind) => expect(most(text)).toBe(kind))

  it('has a row for every cue, and none where nothing is said of work', () => {
    const row = hearKinds(listen([clipOf(['and then there it was', 'drill it over there'])]))
    expect(row.length).toBe(2 * C)
    expect([...row.subarray(0, C)].every(value => value === 0)).toBe(true)
  })

  it('counts a word said again soon less, and in full after a while', () => {
    const soon = [0, 1, 2].map(cue => amount(['drill it over there', 'drill it over there', 'drill it over there'], 'drill', cue))
    expect(soon[1]).toBeLessThan(soon[0]! * 0.7)
    expect(soon[2]).toBeLessThan(soon[1]!)
    expect(amount(['drill it over there', 'drill it over there'], 'drill', 1, 600_000)).toBeCloseTo(soon[0]!, 3)
  })

  it('counts talk of other days less', () => {
    expect(amount(['drill it yesterday'], 'drill', 0)).toBeLessThan(amount(['drill it here now'], 'drill', 0))
  })
})
