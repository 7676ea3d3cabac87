import Fraction from 'fraction.js'
import { describe, expect, it } from 'vitest'
import { formatLength, parseLength } from '#shared/utils/measures'

// Outside sources: 1 in = 25.4 mm and 1 ft = 304.8 mm exactly, 1 yd = 0.9144 m exactly (NIST Special
// Publication 811, 2008 edition, appendix B.8 and footnotes); sums by BigInt by hand and by fraction.js 5.3.4.

const exact = (text: string): string => {
  const reading = parseLength(text, 'inch')
  if (!reading.ok) throw new Error(reading.message)
  return reading.length.exactMm
}

function gcd(a: bigint, b: bigint): bigint {
  return b === 0n ? a : gcd(b, a % b)
}

/** whole + over/under inches in millimetres, by hand: (whole·under + over) · 254 / (10 · under). */
function byHand(whole: bigint, over: bigint, under: bigint): string {
  const n = (whole * under + over) * 254n
  const d = under * 10n
  const common = gcd(n, d)
  return d === common ? String(n / common) : `${n / common}/${d / common}`
}

describe('NIST SP 811', () => {
  it.each([['1 in', '127/5'], ['1 ft', '1524/5'], ['3 ft', '4572/5'], ['12 in', '1524/5'], ['1000 mm', '1000'], ['1 m', '1000'], ['1 cm', '10']])('%s is %s mm', (text, mm) => {
    expect(exact(text)).toBe(mm)
  })

  it('holds on the way back: 25.4 mm are one inch without error', () => {
    expect(formatLength(25.4, 'inch')).toEqual({ text: '1 in', errorMm: 0 })
    expect(formatLength(914.4, 'inch')).toEqual({ text: '36 in', errorMm: 0 })
  })
})

describe('every inch fraction to 1/64', () => {
  const signs: Record<string, string> = { '1/2': '½', '1/4': '¼', '3/4': '¾', '1/8': '⅛', '3/8': '⅜', '5/8': '⅝', '7/8': '⅞' }

  it('is exact as by hand and by fraction.js, in every way of writing it', () => {
    for (const under of [2n, 4n, 8n, 16n, 32n, 64n]) {
      for (let over = 1n; over < under; over++) {
        for (const whole of [0n, 1n, 11n, 143n]) {
          const expected = byHand(whole, over, under)
          const lead = whole === 0n ? '' : `${whole}`
          const fraction = `${over}/${under}`
          expect(new Fraction(fraction).add(whole).mul('25.4').toFraction()).toBe(expected)
          expect(exact(`${lead} ${fraction}`)).toBe(expected)
          expect(exact(`${lead} ${over}⁄${under} in`)).toBe(expected)
          if (lead) expect(exact(`${lead}-${fraction}"`)).toBe(expected)
          if (signs[fraction]) expect(exact(`${lead}${signs[fraction]}`)).toBe(expected)
          expect(exact(`1' ${lead} ${fraction}`)).toBe(byHand(whole + 12n, over, under))
        }
      }
    }
  })

  it('comes back from millimetres as it was, reduced, without error', () => {
    for (let sixtyFourths = 1n; sixtyFourths < 64n; sixtyFourths++) {
      const reading = parseLength(`1 ${sixtyFourths}/64`, 'inch')
      if (!reading.ok) throw new Error(reading.message)
      const { text, errorMm } = formatLength(reading.length.mm, 'inch')
      expect(errorMm).toBeCloseTo(0, 12)
      expect(exact(text)).toBe(reading.length.exactMm)
      const common = gcd(sixtyFourths, 64n)
      if (common < 8n) expect(text).toBe(`1 ${sixtyFourths / common}⁄${64n / common} in`)
    }
  })
})
