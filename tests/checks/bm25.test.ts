import BM25 from 'okapibm25'
import { describe, expect, it } from 'vitest'
import { weightOf } from '#server/indexing/search/rarity'
import { bm25 } from '../measure/indexing/questions'

// Outside source: the npm package okapibm25 1.4.1, on the same documents. Words of which none is part of another,
// since the package counts substrings.

const DOCUMENTS = [
  'glue the transom with thick epoxy and clamp the transom',
  'plane the bevel along the chine',
  'the epoxy wants twenty minutes in the cup before it kicks and gets hot',
  'sand',
  'mark the bevel with pencil then plane down close by the pencil line',
]
const rank = BM25 as unknown as { default: typeof BM25 }
const reference = typeof BM25 === 'function' ? BM25 : rank.default
const words = DOCUMENTS.map(text => text.split(' '))
const mean = words.reduce((sum, list) => sum + list.length, 0) / words.length
const of = new Map<string, number>()
for (const list of words) for (const word of new Set(list)) of.set(word, (of.get(word) ?? 0) + 1)
const frequencies = { passages: DOCUMENTS.length, of }

describe('BM25', () => {
  it.each([[['epoxy']], [['transom']], [['bevel', 'pencil']], [['plane', 'epoxy', 'clamp', 'sand']], [['rivet']]])('scores %j as the library does', (asked) => {
    const expected = reference(DOCUMENTS, asked, { k1: 1.2, b: 0.75 }) as number[]
    words.forEach((list, i) => expect(bm25(asked, list, mean, frequencies)).toBeCloseTo(expected[i]!, 10))
  })
  it('weighs rarity in ranking as the library does', () => {
    // A document of average length with the word once scores the bare weight of the word.
    const same = ['epoxy cup', 'plane bevel', 'clamp cup', 'sand line']
    const frequencies = { passages: 4, of: new Map([['epoxy', 1], ['cup', 2]]) }
    for (const word of ['epoxy', 'cup']) expect(weightOf(word, frequencies)).toBeCloseTo((reference(same, [word], { k1: 1.2, b: 0.75 }) as number[])[0]!, 10)
  })
})
