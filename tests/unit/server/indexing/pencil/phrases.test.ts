import { describe, expect, it } from 'vitest'
import { PhraseBook } from '#server/indexing/pencil/phrases'
import { tokenise } from '#server/indexing/words/tokenise'

const find = (phrases: string[], text: string) => {
  const found: [string, number, number][] = []
  new PhraseBook(phrases.map(phrase => [phrase, phrase] as const)).find(tokenise(text).map(token => token.stem), (meaning, at, length) => found.push([meaning, at, length]))
  return found
}

describe('phrases in a row of stems', () => {
  it('finds every form of a phrase, also over grammar words', () => {
    expect(find(['squeeze out', 'no glue'], 'the glue squeezes out, no glue')).toEqual([['squeeze out', 2, 2], ['no glue', 4, 2]])
  })
  it('finds phrases that share words, each where it starts', () => {
    expect(find(['hole', 'pilot hole', 'hole saw'], 'pilot hole saw')).toEqual([['pilot hole', 0, 2], ['hole', 1, 1], ['hole saw', 1, 2]])
  })
  it('does not find one that runs off the end, an empty one, or a name of a prototype', () => {
    expect(find(['pilot hole', '', '—'], 'drill a pilot')).toEqual([])
    expect(find(['glue'], 'constructor toString')).toEqual([])
  })
  it('gives every meaning of a phrase', () => {
    const found: number[] = []
    new PhraseBook([['rail', 1], ['rails', 2]] as const).find(['rail'], meaning => found.push(meaning))
    expect(found).toEqual([1, 2])
  })
})
