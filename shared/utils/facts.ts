import type { FactView } from '../types/facts'
import type { FactKind, FactUnit, Units } from '../types/trade'
import { formatLength, parseLength } from './measures'
import { formatTemperature, readTemperature } from './temperature'

/** Facts as people read and write them. Kept: mm, °C, degrees, minutes, pieces, and a ratio as its first number to 1. */

type Measured = Pick<FactView, 'kind' | 'value' | 'unit' | 'said'>

export const FACT_WORDS: Record<FactKind, string> = {
  length: 'Length', angle: 'Angle', thickness: 'Thickness', ratio: 'Ratio', time: 'Time', count: 'Number', temperature: 'Temperature', adhesive: 'Glue', fastener: 'Fastener',
}

/** From this length on inches alone are hard to picture. */
const FEET_FROM_IN = 36
const MM_PER_INCH = 25.4
/** Facts are kept to a tenth of a millimetre; what is off by more than half of that is not what was said. */
const EXACT_MM = 0.06

/** The value in the build's units: '3⁄8 in', '12 ft', '15°', '45 min', '8 : 1', '68 °F'. Null when it is a name and no number. */
export function factValue({ value, unit }: Pick<Measured, 'value' | 'unit'>, units: Units): string | null {
  if (value === null) return null
  switch (unit) {
    case 'mm': return lengthText(value, units)
    case 'deg': return `${plain(value)}°`
    case 'min': return timeText(value)
    case 'C': return formatTemperature(value, units)
    case 'ratio': return `${plain(value)} : 1`
    case 'count': case null: return plain(value)
  }
}

function lengthText(mm: number, units: Units): string {
  const inches = mm / MM_PER_INCH
  if (units === 'mm' || inches < FEET_FROM_IN) {
    const { text, errorMm } = formatLength(mm, units)
    // 9 mm plywood is no 23⁄64 in.
    return Math.abs(errorMm) > EXACT_MM ? `≈ ${text}` : text
  }
  const feet = Math.floor(inches / 12 + 1e-6)
  const rest = mm - feet * 12 * MM_PER_INCH
  return Math.abs(rest) < MM_PER_INCH / 128 ? `${feet} ft` : `${feet} ft ${formatLength(rest, 'inch').text}`
}

function timeText(minutes: number): string {
  if (minutes < 1) return `${Math.round(minutes * 60)} s`
  if (minutes < 120) return `${plain(minutes)} min`
  if (minutes < 48 * 60) return `${plain(minutes / 60)} h`
  return `${plain(minutes / 60 / 24)} days`
}

const plain = (value: number) => String(Math.round(value * 100) / 100).replace('-', '−')

/** A fact in one line: the value, or its words where it has none. */
export const factLine = (fact: Measured, units: Units): string => factValue(fact, units) ?? fact.said

export type FactReading = { ok: true, value: number | null, unit: FactUnit | null } | { ok: false, message: string }

/** Reads a mended value in the fact's own measure; a bare number is in the build's units. */
export function readFactValue(text: string, { unit }: Pick<Measured, 'unit'>, units: Units): FactReading {
  const typed = text.replace('≈', '').trim()
  if (unit === 'mm') {
    const read = parseLength(typed, units)
    return read.ok ? { ok: true, value: Math.round(read.length.mm * 1000) / 1000, unit } : read
  }
  if (unit === 'C') {
    const read = readTemperature(typed, units)
    if (!read.ok) return read
    return read.celsius === null ? { ok: false, message: 'Write a temperature, such as 68 °F or 20 °C.' } : { ok: true, value: read.celsius, unit }
  }
  const found = /^([−-]?\d+(?:[.,]\d+)?)\s*(.*)$/.exec(typed)
  if (!found) return { ok: false, message: `“${typed.slice(0, 30)}” is not a number.` }
  const value = Number(found[1]!.replace(',', '.').replace('−', '-'))
  const rest = found[2]!.toLowerCase()
  if (unit === 'min') {
    const per = /^(?:s|secs?|seconds?)$/.test(rest) ? 1 / 60 : /^(?:h|hrs?|hours?)$/.test(rest) ? 60 : /^(?:d|days?)$/.test(rest) ? 1440 : /^(?:m|mins?|minutes?)?$/.test(rest) ? 1 : null
    return per === null ? { ok: false, message: 'Write a time as 45 min, 2 h, 30 s or 3 days.' } : { ok: true, value: value * per, unit }
  }
  if (unit === 'ratio') {
    const to = /^(?::|to|\/)\s*(\d+(?:[.,]\d+)?)$/.exec(rest)
    const one = to ? Number(to[1]!.replace(',', '.')) : 1
    return (rest === '' || to) && one > 0 ? { ok: true, value: value / one, unit } : { ok: false, message: 'Write a ratio as 8 to 1 or 2 : 1.' }
  }
  if (rest && !(unit === 'deg' && /^(?:°|deg|degrees?)$/.test(rest))) return { ok: false, message: unit === 'deg' ? 'Write an angle in degrees, such as 12.5°.' : `“${typed.slice(0, 30)}” is not a number.` }
  return { ok: true, value, unit }
}
