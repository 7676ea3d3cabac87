import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { factTokens } from '#server/indexing/facts/tokens'

const texts = (text: string) => factTokens(text).map(token => token.text)

describe('tokens of speech', () => {
  it.each([
    ['1 1⁄2 inches', ['1', '1', '⁄', '2', 'inches']],
    ['1½" thick', ['1', '½', '"', 'thick']],
    ['1,200 mm and 2.5', ['1,200', 'mm', 'and', '2.5']],
    ['a .5 gap', ['a', '.5', 'gap']],
    ['done.5 more', ['done', '.', '5', 'more']],
    ['3\'6" it\'s 6’', ['3', '\'', '6', '"', 'it\'s', '6', '\'']],
    ['the 60’s', ['the', '60', 's']],
    ['Don’t', ['don\'t']],
    ['#8, 8:1 (50/50) £5', ['#', '8', ',', '8', ':', '1', '50', '/', '50', '£', '5']],
    ['', []],
  ])('reads %s', (text, expected) => expect(texts(text)).toEqual(expected))

  it('tells figures from words, and from signs', () => {
    expect(factTokens('6 ½ six .5 #').map(token => token.number)).toEqual([true, false, false, true, false])
  })

  it('keeps the place of every token in the text', () => {
    fc.assert(fc.property(fc.string(), (text) => {
      let end = 0
      for (const token of factTokens(text)) {
        expect(token.start).toBeGreaterThanOrEqual(end)
        expect(text.slice(token.start, token.end).toLowerCase().replace('’', '\'')).toBe(token.text)
        end = token.end
      }
    }))
  })
})
