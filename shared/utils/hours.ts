import { formatFraction } from './measures'

export type HoursReading = { ok: true, minutes: number | null } | { ok: false, message: string }

/** Reads hours written as `2`, `2.5` or `2,5`; nothing written is null. Kept as whole minutes. */
export function parseHours(text: string): HoursReading {
  const written = text.replace(/\s+/g, ' ').trim()
  if (!written) return { ok: true, minutes: null }
  if (!/^(?:\d+(?:[.,]\d*)?|[.,]\d+)$/.test(written)) {
    return { ok: false, message: `“${written.length > 40 ? `${written.slice(0, 39)}…` : written}” is not a number of hours. Write it as 2 or 2.5.` }
  }
  return { ok: true, minutes: Math.round(Number(written.replace(',', '.')) * 60) }
}

/** Minutes as hours with at most three decimals, fine enough to come back as the same minutes: 150 → `2.5`, 20 → `0.333`. */
export function hoursText(minutes: number | null): string {
  return minutes === null ? '' : String(Math.round(minutes / 60 * 1000) / 1000)
}

/** Minutes as people say them: `45 min`, `2½ h`, `1 h 20 min`. Quarters of an hour are set as fractions. */
export function sayMinutes(minutes: number): string {
  if (minutes < 60) return `${minutes} min`
  if (minutes % 15 === 0) return `${formatFraction(`${minutes}/60`)} h`
  return `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}
