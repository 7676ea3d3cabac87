import type { Units } from '../types/trade'

export type TemperatureReading = { ok: true, celsius: number | null } | { ok: false, message: string }

/**
 * Reads a shop's temperature: `68`, `68 F`, `20 °C`, `20,5c`, `-4`. A number without a unit is °F where the
 * build is in inches and °C where it is in millimetres. Nothing typed is no temperature.
 * °C = (°F − 32) × 5/9 exactly (NIST SP 811, B.8); kept to a hundredth.
 */
export function readTemperature(text: string, units: Units): TemperatureReading {
  const typed = text.trim()
  if (typed === '') return { ok: true, celsius: null }
  const found = /^([-−–]?)\s*(\d+(?:[.,]\d+)?)\s*(?:°|º|deg(?:rees)?)?\s*([cf]?)(?:elsius|ahrenheit)?$/i.exec(typed)
  if (!found) return { ok: false, message: `“${typed.slice(0, 30)}” is not a temperature. Write it as 68 °F or 20 °C.` }
  const value = Number(found[2]!.replace(',', '.')) * (found[1] ? -1 : 1)
  const fahrenheit = found[3] ? found[3].toLowerCase() === 'f' : units === 'inch'
  const celsius = Math.round((fahrenheit ? (value - 32) * 5 / 9 : value) * 100) / 100
  if (celsius < -60 || celsius > 70) return { ok: false, message: `${typed} is colder or hotter than any shop. Check the unit.` }
  return { ok: true, celsius: celsius === 0 ? 0 : celsius }
}

/** A temperature in the build's units: '68 °F', '20.5 °C'. Whole degrees of °F, at most tenths of °C. */
export function formatTemperature(celsius: number, units: Units): string {
  const sign = (text: string) => text.replace('-', '−')
  if (units === 'inch') return sign(`${Math.round(celsius * 9 / 5 + 32) || 0} °F`)
  return sign(`${Math.round(celsius * 10) / 10 || 0} °C`)
}
