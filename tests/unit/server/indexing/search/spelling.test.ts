import fc from 'fast-check'
import { expect, it } from 'vitest'
import { alike, forgiven, nearest, slips } from '#server/indexing/search/spelling'

it('counts letters left out, put in, changed and swapped', () => {
  expect(slips('transom', 'transom', 2)).toBe(0)
  expect(slips('transon', 'transom', 2)).toBe(1)
  expect(slips('tansom', 'transom', 2)).toBe(1)
  expect(slips('trnasom', 'transom', 2)).toBe(1)
  expect(slips('gunwhale', 'gunwale', 2)).toBe(1)
  expect(slips('epoxy', 'varnish', 2)).toBe(3)
})

it('is the same both ways, and nought only for equals', () => {
  const word = fc.string({ minLength: 0, maxLength: 8, unit: fc.constantFrom('a', 'b', 'c') })
  fc.assert(fc.property(word, word, (a, b) => {
    expect(slips(a, b, 20)).toBe(slips(b, a, 20))
    expect(slips(a, b, 20) === 0).toBe(a === b)
  }))
})

it('reads what is likeliest meant', () => {
  const vocabulary = [{ word: 'transom', count: 5 }, { word: 'random', count: 90 }, { word: 'transoms', count: 2 }, { word: 'each', count: 900 }]
  expect(nearest('transon', vocabulary).map(entry => entry.word)).toEqual(['transom'])
  expect(nearest('reach', vocabulary)).toEqual([])
  expect(forgiven('log')).toBe(0)
})

it('suggests only what is truly alike', () => {
  const vocabulary = ['flare', 'fillet', 'gunwale', 'varnish', 'glue'].map(word => ({ word, count: 5 }))
  const suggested = (typed: string) => nearest(typed, vocabulary, alike(typed)).map(entry => entry.word)
  for (const nonsense of ['flurb', 'frobx', 'fnord', 'flibbert', 'vorpal', 'gimble', 'gyre', 'x']) expect(suggested(nonsense), nonsense).toEqual([])
  expect(suggested('gunwhal')).toEqual(['gunwale'])
  expect(suggested('filit')).toEqual([])
  expect(suggested('filliet')).toEqual(['fillet'])
  expect(suggested('glu')).toEqual(['glue'])
})
