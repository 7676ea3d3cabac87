import { describe, expect, it } from 'vitest'
import { formatTemperature, readTemperature } from '#shared/utils/temperature'

describe('temperatures as typed in a shop', () => {
  it.each([
    ['68', 'inch', 20], ['20', 'mm', 20], ['68 F', 'mm', 20], ['20 °C', 'inch', 20], ['20,5c', 'mm', 20.5], ['−4', 'mm', -4], ['-40 F', 'inch', -40], ['70 degrees fahrenheit', 'mm', 21.11], ['32f', 'mm', 0], ['', 'inch', null],
  ] as const)('%s in %s is %s °C', (typed, units, celsius) => {
    expect(readTemperature(typed, units)).toEqual({ ok: true, celsius })
  })
  it.each(['warm', '20 K', '4:05', '500', '--3'])('refuses %s', (typed) => {
    expect(readTemperature(typed, 'mm').ok).toBe(false)
  })
  it('writes them in the build’s units', () => {
    expect(formatTemperature(20, 'inch')).toBe('68 °F')
    expect(formatTemperature(-5.04, 'mm')).toBe('−5 °C')
    expect(formatTemperature(20.5, 'mm')).toBe('20.5 °C')
    expect(formatTemperature(-17.78, 'inch')).toBe('0 °F')
  })
})
