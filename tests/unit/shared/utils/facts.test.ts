import { describe, expect, it } from 'vitest'
import { factLine, factValue, readFactValue } from '#shared/utils/facts'
import type { FactUnit } from '#shared/types/trade'

// 1 in = 25.4 mm, 1 ft = 12 in, °C = (°F − 32) × 5/9 exactly: NIST SP 811, B.8.
describe('a fact as people read it', () => {
  it.each([
    [9.525, 'mm', 'inch', '⅜ in'], [9.5, 'mm', 'inch', '⅜ in'], [9.5, 'mm', 'mm', '9.5 mm'], [9, 'mm', 'inch', '≈ 23⁄64 in'], [3657.6, 'mm', 'inch', '12 ft'], [1949.45, 'mm', 'inch', '6 ft 4¾ in'],
    [12.5, 'deg', 'inch', '12.5°'], [45, 'min', 'mm', '45 min'], [0.5, 'min', 'mm', '30 s'], [720, 'min', 'mm', '12 h'], [4320, 'min', 'mm', '3 days'],
    [20, 'C', 'inch', '68 °F'], [20, 'C', 'mm', '20 °C'], [8, 'ratio', 'inch', '8 : 1'], [24, 'count', 'inch', '24'], [null, null, 'inch', null],
  ] as const)('%s %s in %s is %s', (value, unit, units, text) => {
    expect(factValue({ value, unit }, units)).toBe(text)
  })
  it('without a value is its words', () => {
    expect(factLine({ kind: 'adhesive', value: null, unit: null, said: 'thickened epoxy' }, 'mm')).toBe('thickened epoxy')
  })
})

describe('a mended value', () => {
  const read = (text: string, unit: FactUnit | null, units: 'inch' | 'mm' = 'inch') => {
    const found = readFactValue(text, { unit }, units)
    return found.ok ? found.value : found.message
  }
  it.each([
    ['1 1/2', 'mm', 38.1], ['9 mm', 'mm', 9], ['12.5°', 'deg', 12.5], ['2 h', 'min', 120], ['30 s', 'min', 0.5], ['45', 'min', 45], ['68', 'C', 20], ['8 to 1', 'ratio', 8], ['5 : 2', 'ratio', 2.5], ['24', 'count', 24],
  ] as const)('%s of %s is %s', (text, unit, value) => {
    expect(read(text, unit)).toBe(value)
  })
  it.each([['', 'deg'], ['two', 'count'], ['8 to 0', 'ratio'], ['4 parsecs', 'min'], ['1/0', 'mm'], ['', 'C'], ['12 cubits', 'deg']] as const)('“%s” of %s is refused in words', (text, unit) => {
    expect(read(text, unit)).toEqual(expect.stringMatching(/\w{3}/))
  })
  it('reads back what it writes', () => {
    for (const [value, unit] of [[38.1, 'mm'], [12.5, 'deg'], [45, 'min'], [720, 'min'], [20, 'C'], [8, 'ratio'], [3657.6, 'mm'], [1949.45, 'mm']] as const) {
      for (const units of ['inch', 'mm'] as const) expect(readFactValue(factValue({ value, unit }, units)!, { unit }, units), `${value} ${unit} ${units}`).toMatchObject({ ok: true, value: expect.closeTo(value, 0) })
    }
  })
})
