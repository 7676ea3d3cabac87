import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { placeNewRows, reorder } from '#server/indexing/plan/order'

const rows = (text: string) => [...text].map(id => ({ id, isNew: id >= 'A' && id <= 'Z' }))

describe('places of new rows', () => {
  it.each([
    ['all new', '', 'ABC', 'ABC'],
    ['at the end', 'ab', 'abC', 'abC'],
    ['between two', 'ab', 'aCb', 'aCb'],
    ['before the first', 'ab', 'Cab', 'Cab'],
    ['several at the head', 'ab', 'CDb', 'aCDb'],
    ['none known in the table', 'ab', 'CD', 'abCD'],
    ['known ones in another order stay', 'abc', 'cXa', 'abcX'],
  ])('%s', (_, standing, table, order) => {
    expect(placeNewRows([...standing], rows(table)).join('')).toBe(order)
  })
})

describe('a new order of the rows in use', () => {
  const standing = [{ id: 'x', archived: true }, { id: 'a', archived: false }, { id: 'y', archived: true }, { id: 'b', archived: false }, { id: 'c', archived: false }]

  it('keeps archived rows behind the row they stood behind', () => {
    expect(reorder(standing, ['b', 'c', 'a'])).toEqual(['x', 'b', 'c', 'a', 'y'])
  })

  it.each([['one missing', ['a', 'b']], ['one twice', ['a', 'b', 'b']], ['a stranger', ['a', 'b', 'z']], ['an archived one', ['a', 'b', 'c', 'x']]])('is refused with %s', (_, wanted) => {
    expect(reorder(standing, wanted)).toBeUndefined()
  })

  it('loses no row and gives the wanted order, whatever is archived', () => {
    fc.assert(fc.property(fc.array(fc.boolean(), { maxLength: 12 }), fc.infiniteStream(fc.nat()), (archived, keys) => {
      const all = archived.map((is, i) => ({ id: String(i), archived: is }))
      const wanted = all.filter(row => !row.archived).map(row => ({ id: row.id, key: keys.next().value })).sort((a, b) => a.key - b.key).map(row => row.id)
      const order = reorder(all, wanted)!
      expect([...order].sort()).toEqual(all.map(row => row.id).sort())
      expect(order.filter(id => wanted.includes(id))).toEqual(wanted)
    }))
  })
})
