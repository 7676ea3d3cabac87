import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { formatFraction, formatLength, parseLength } from '#shared/utils/measures'

const read = (text: string, units: 'inch' | 'mm' = 'inch') => parseLength(text, units)

describe('parseLength', () => {
  it.each<[string, string, string]>([
    ['1 1/2', '381/10', 'in'],
    ['1-1/2"', '381/10', 'in'],
    ['1 1⁄2 in', '381/10', 'in'],
    ['1½', '381/10', 'in'],
    ['1 ½”', '381/10', 'in'],
    ['½', '127/10', 'in'],
    ['3/4', '381/20', 'in'],
    ['5.5"', '1397/10', 'in'],
    ['.5 inch', '127/10', 'in'],
    ['1.5 inches', '381/10', 'in'],
    ['38 mm', '38', 'mm'],
    ['38mm', '38', 'mm'],
    ['38,5 mm', '77/2', 'mm'],
    ['3.8 cm', '38', 'cm'],
    ['2.4 m', '2400', 'm'],
    ['2 metres', '2000', 'm'],
    ['6 ft', '9144/5', 'ft'],
    ['6\'', '9144/5', 'ft'],
    ['1 foot', '1524/5', 'ft'],
    ['2\' 3 1/4', '13843/20', 'in'],
    ['2\'-3 1/4"', '13843/20', 'in'],
    ['2′ 3¼″', '13843/20', 'in'],
    ['2 ft 3 in', '3429/5', 'in'],
    ['2’ 3’’', '3429/5', 'in'],
    ['1 13/64', '9779/320', 'in'],
    ['3/3', '127/5', 'in'],
    ['12 3/4', '6477/20', 'in'],
    ['0', '0', 'in'],
    ['  7  ', '889/5', 'in'],
  ])('%s is %s mm', (text, exactMm, unit) => {
    expect(read(text)).toEqual({ ok: true, length: { mm: expect.any(Number), exactMm, unit } })
  })

  it('takes a bare number in the units of the build', () => {
    expect(read('38', 'mm')).toEqual({ ok: true, length: { mm: 38, exactMm: '38', unit: 'mm' } })
    expect(read('1/2', 'mm')).toMatchObject({ ok: true, length: { mm: 0.5 } })
    expect(read('1 1/2"', 'mm')).toMatchObject({ ok: true, length: { mm: 38.1, unit: 'in' } })
    expect(read('2\' 3', 'mm')).toMatchObject({ ok: true, length: { mm: 685.8 } })
  })

  it.each<[string, RegExp]>([
    ['', /Write a length/],
    ['1/0', /zero under the bar/],
    ['1 1/00"', /zero under the bar/],
    ['12 3/4/8', /is not a length/],
    ['-3', /negative/],
    ['−1/2"', /negative/],
    ['2 3', /more than one length/],
    ['1 in 2 ft', /more than one length/],
    ['2 ft 30 mm', /more than one length/],
    ['1 2 1/2', /more than one length/],
    ['plank', /is not a length/],
    ['3 planks', /is not a length/],
    ['3 mmm', /is not a length/],
    ['1.2.3', /is not a length/],
    ['1/2/', /is not a length/],
    ['1e3', /is not a length/],
    ['5"x', /is not a length/],
    ['1001 m', /over a kilometre/],
    ['99999999 ft', /over a kilometre/],
    ['1'.repeat(100), /too long/],
  ])('%j is refused', (text, message) => {
    const reading = read(text)
    expect(reading).toEqual({ ok: false, message: expect.stringMatching(message) })
  })
})

describe('formatLength', () => {
  it.each<[number, string]>([
    [0, '0 in'], [25.4, '1 in'], [38.1, '1½ in'], [12.7, '½ in'], [19.05, '¾ in'], [3.175, '⅛ in'], [1.190625, '3⁄64 in'], [30.559375, '1 13⁄64 in'], [28.575, '1⅛ in'], [304.8, '12 in'],
  ])('%d mm is %s', (mm, text) => {
    expect(formatLength(mm, 'inch').text).toBe(text)
  })

  it('says how far the rounded text is off', () => {
    const { text, errorMm } = formatLength(38, 'inch')
    expect(text).toBe('1½ in')
    expect(errorMm).toBeCloseTo(0.1, 12)
    expect(formatLength(38.1, 'inch').errorMm).toBeCloseTo(0, 12)
    expect(formatLength(25, 'inch', { denominator: 16 })).toEqual({ text: '1 in', errorMm: expect.closeTo(0.4, 12) })
  })

  it('writes millimetres to a tenth', () => {
    expect(formatLength(38, 'mm')).toEqual({ text: '38 mm', errorMm: 0 })
    expect(formatLength(19.05, 'mm').text).toBe('19.1 mm')
    expect(formatLength(1.190625, 'mm').text).toBe('1.2 mm')
  })

  it('is never off by more than half a step, and reads back as it says', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 5_000_000 }), (tenths) => {
      const mm = tenths / 10
      const { text, errorMm } = formatLength(mm, 'inch')
      expect(Math.abs(errorMm)).toBeLessThanOrEqual(25.4 / 128 + 1e-9)
      const back = parseLength(text, 'mm')
      expect(back.ok && back.length.mm).toBeCloseTo(mm + errorMm, 6)
    }))
  })
})

it.each([['3/2', '1½'], ['131/64', '2 3⁄64'], ['1/3', '⅓'], ['4/2', '2'], ['-3/2', '−1½'], ['0', '0'], ['7/16', '7⁄16']])('formatFraction sets %s as %s', (fraction, text) => {
  expect(formatFraction(fraction)).toBe(text)
})
