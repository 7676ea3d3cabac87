import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hoursText, parseHours, sayMinutes } from '#shared/utils/hours'

describe('hours as written', () => {
  it.each([['', null], [' 2 ', 120], ['2.5', 150], ['2,25', 135], ['.5', 30], ['0', 0], ['1.', 60]])('%j is %j minutes', (text, minutes) => {
    expect(parseHours(text)).toEqual({ ok: true, minutes })
  })

  it.each(['two', '-1', '1:30', '2 h', '1e3', '.'])('%j is refused', (text) => {
    expect(parseHours(text)).toEqual({ ok: false, message: `“${text}” is not a number of hours. Write it as 2 or 2.5.` })
  })

  it('come back as the same minutes', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 600_000 }), (minutes) => {
      expect(parseHours(hoursText(minutes))).toEqual({ ok: true, minutes })
    }))
  })
})

it.each([[0, '0 min'], [45, '45 min'], [60, '1 h'], [150, '2½ h'], [80, '1 h 20 min'], [1455, '24¼ h']])('%i minutes are said as %s', (minutes, words) => {
  expect(sayMinutes(minutes)).toBe(words)
})
