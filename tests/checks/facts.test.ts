import { describe, expect, it } from 'vitest'
import { hearFacts, tenth, wireGaugeMm } from '#server/indexing/facts/hearFacts'

// Outside sources: 1 in = 25.4 mm and 1 ft = 304.8 mm exactly, t/°C = (t/°F − 32)/1.8 (NIST Special Publication 811,
// 2008 edition, appendix B.8); diameters of solid round wire in the American wire gauge (ASTM B258, table 1),
// written down from memory, and held against its rule: 0.005 in at No. 36, 0.46 in at No. 0000, 39 equal ratios between.

const value = (text: string, fahrenheit = true) => hearFacts({ cues: [{ startMs: 0, endMs: 1000, text }] }, { speaker: { inches: fahrenheit, fahrenheit } })[0]?.value

describe('NIST SP 811', () => {
  it('an inch is 25.4 mm, a foot 304.8 mm, a yard 914.4 mm', () => {
    expect(['1 inch', '10 inches', '1 foot long', '100 feet', '2 yards'].map(text => value(text))).toEqual([25.4, 254, 304.8, 30_480, 1828.8])
  })

  it('holds for every sixteenth to three inches, to a tenth of a millimetre', () => {
    for (let sixteenths = 1; sixteenths < 48; sixteenths++) {
      const whole = Math.floor(sixteenths / 16)
      const over = sixteenths % 16
      const text = `${whole || ''} ${over ? `${over}/16` : ''} inches`.trim()
      // In whole tenths of a millimetre, halves up: n/16 × 254, in integers.
      expect(value(text), text).toBe(Math.floor((sixteenths * 254 * 2 + 16) / 32) / 10)
    }
  })

  it('rounds to a tenth, halves up', () => {
    expect([9.525, 1.5875, 0.05, 3.175, 19.05].map(tenth)).toEqual([9.5, 1.6, 0.1, 3.2, 19.1])
  })

  it.each([[32, 0], [212, 100], [-40, -40], [68, 20], [59, 15], [14, -10], [98.6, 37]])('%s °F is %s °C', (fahrenheit, celsius) => {
    expect(value(`${fahrenheit < 0 ? 'minus ' : ''}${Math.abs(fahrenheit)} degrees fahrenheit`)).toBe(celsius)
  })
})

describe('ASTM B258', () => {
  it.each([[10, 2.588], [12, 2.053], [14, 1.628], [16, 1.291], [18, 1.024]])('No. %s is %s mm', (gauge, mm) => {
    expect(wireGaugeMm(gauge)).toBeCloseTo(mm, 3)
    expect(value(`${gauge} gauge wire`)).toBe(tenth(mm))
  })

  it('keeps to its rule at both ends', () => {
    expect(wireGaugeMm(36)).toBeCloseTo(0.005 * 25.4, 12)
    expect(wireGaugeMm(-3)).toBeCloseTo(0.46 * 25.4, 12)
    expect(wireGaugeMm(10) / wireGaugeMm(16)).toBeCloseTo(92 ** (6 / 39), 12)
  })
})
