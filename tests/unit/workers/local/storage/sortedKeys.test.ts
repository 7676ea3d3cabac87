import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compareKeys, lowerBound, pageOfKeys } from '../../../../../workers/local/storage/sortedKeys'

const key = fc.string({ unit: fc.constantFrom('a', 'b', '/', 'é', '\uFFFD', '😀'), minLength: 1, maxLength: 6 })
const keys = fc.uniqueArray(key, { maxLength: 40 }).map(list => list.sort(compareKeys))

/** Follows the pages to the end. */
function everyPage(sorted: string[], options: { prefix: string, delimiter: string, max: number }) {
  const found = { keys: [] as string[], prefixes: [] as string[] }
  let after = ''
  for (let turn = 0; turn < 200; turn++) {
    const page = pageOfKeys(sorted, { ...options, after })
    expect(page.keys.length + page.prefixes.length).toBeLessThanOrEqual(options.max)
    found.keys.push(...page.keys)
    found.prefixes.push(...page.prefixes)
    if (page.next === null) return found
    after = page.next
  }
  throw new Error('The listing never ended.')
}

describe('compareKeys', () => {
  it('orders by UTF-8 bytes', () => {
    fc.assert(fc.property(key, key, (a, b) => {
      expect(Math.sign(compareKeys(a, b))).toBe(Buffer.compare(Buffer.from(a), Buffer.from(b)))
    }))
  })

  it('finds the first key that is not before another', () => {
    fc.assert(fc.property(keys, key, (sorted, wanted) => {
      expect(lowerBound(sorted, wanted)).toBe(sorted.filter(each => compareKeys(each, wanted) < 0).length)
    }))
  })
})

describe('pageOfKeys', () => {
  it('lists every key once, in order, whatever the page size', () => {
    fc.assert(fc.property(keys, fc.integer({ min: 1, max: 7 }), fc.constantFrom('', 'a', 'a/', 'é'), (sorted, max, prefix) => {
      expect(everyPage(sorted, { prefix, delimiter: '', max }).keys).toEqual(sorted.filter(each => each.startsWith(prefix)))
    }))
  })

  it('folds keys at the delimiter, each folder once', () => {
    fc.assert(fc.property(keys, fc.integer({ min: 1, max: 5 }), fc.constantFrom('', 'a', 'a/'), (sorted, max, prefix) => {
      const inside = sorted.filter(each => each.startsWith(prefix))
      const cut = (each: string) => each.indexOf('/', prefix.length)
      const found = everyPage(sorted, { prefix, delimiter: '/', max })
      expect(found.keys).toEqual(inside.filter(each => cut(each) < 0))
      expect(found.prefixes).toEqual([...new Set(inside.filter(each => cut(each) >= 0).map(each => each.slice(0, cut(each) + 1)))])
    }))
  })

  it('starts after a key that is not there', () => {
    expect(pageOfKeys(['a', 'c', 'e'], { prefix: '', delimiter: '', after: 'b', max: 10 }).keys).toEqual(['c', 'e'])
  })

  it('gives nothing when nothing is asked', () => {
    expect(pageOfKeys(['a'], { prefix: '', delimiter: '', after: '', max: 0 })).toEqual({ keys: [], prefixes: [], next: null })
  })
})
