const WEEKDAYS = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat']
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']

/**
 * A calendar day for people: '2026-09-05' → 'Sat 5 Sep 2026'. Spelt here, because Node and browsers differ in
 * how they shorten September, and page and server must agree.
 */
export function formatDay(date: string): string {
  const day = new Date(`${date}T12:00:00Z`)
  if (Number.isNaN(day.getTime())) return date
  return `${WEEKDAYS[day.getUTCDay()]} ${day.getUTCDate()} ${MONTHS[day.getUTCMonth()]} ${day.getUTCFullYear()}`
}

/** A length of footage for lists: '48 s', '12 min', '3 h 05 min'. */
export function formatFootage(ms: number): string {
  const seconds = Math.round(ms / 1000)
  if (seconds < 60) return `${seconds} s`
  const minutes = Math.round(seconds / 60)
  if (minutes < 60) return `${minutes} min`
  return `${Math.floor(minutes / 60)} h ${String(minutes % 60).padStart(2, '0')} min`
}
