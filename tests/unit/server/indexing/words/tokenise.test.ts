import { describe, expect, it } from 'vitest'
import { stemOf, stemsOf, tokenise } from '#server/indexing/words/tokenise'

describe('stems', () => {
  it.each([
    ['glue glued gluing glueing glues'], ['saw sawn sawed sawing'], ['scribe scribed scribing'], ['plane planed planing'], ['clamp clamped clamps clamping'],
    ['centre center centres'], ['mould mold moulded'], ['gunwale gunnel gunwales'], ['bend bent bending'], ['stick stuck sticking'], ['plywood ply'], ['oarlock rowlock'],
  ])('are one for %s', words => expect(new Set(words.split(' ').map(stemOf)).size).toBe(1))
  it('keep planes and plans apart', () => expect(stemOf('planed')).not.toBe(stemOf('planned')))
})

describe('tokenise', () => {
  it('gives words with their places', () => {
    const text = 'Builder’s café: dry-fit, 1 1/2 in. 9mm'
    expect(tokenise(text).map(token => token.word)).toEqual(['builder', 'cafe', 'dry', 'fit', '1', '1', '2', 'in', '9', 'mm'])
    for (const token of tokenise(text)) expect(text.slice(token.start, token.end).length).toBeGreaterThan(0)
  })
  it('passes over noise', () => expect(tokenise(`${'x'.repeat(500)} 🛶 -- \u0000`)).toEqual([]))
  it('leaves small words out of phrases', () => expect(stemsOf('the end of the board')).toEqual(['end', 'board']))
})
