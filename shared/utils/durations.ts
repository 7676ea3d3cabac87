/** A length of footage for people: '40 s', '12 min', '3 h 5 min'. Rounded to the nearest; `0 min` for none. */
export function minutesInWords(ms: number): string {
  if (ms <= 0) return '0 min'
  if (ms < 60_000) return `${Math.max(1, Math.round(ms / 1000))} s`
  const minutes = Math.round(ms / 60_000)
  if (minutes < 60) return `${minutes} min`
  return minutes % 60 ? `${Math.floor(minutes / 60)} h ${minutes % 60} min` : `${minutes / 60} h`
}
