/**
 * Times as people read and write them, and the time part of links. Milliseconds throughout.
 * Frames and timecode are in frames.ts.
 */

/**
 * A running time for people: '4:05', '1:02:03', with `tenths` '4:05.3'. Rounded down, like a clock,
 * so that a time is never shown before it is reached. Negative times carry a minus sign.
 */
export function formatClock(ms: number, options: { tenths?: boolean } = {}): string {
  if (!Number.isFinite(ms)) return '–'
  const total = Math.floor(Math.abs(ms))
  const seconds = Math.floor(total / 1000)
  const hours = Math.floor(seconds / 3600)
  const minutes = Math.floor(seconds / 60) % 60
  const two = (n: number) => String(n).padStart(2, '0')
  const clock = hours > 0 ? `${hours}:${two(minutes)}:${two(seconds % 60)}` : `${minutes}:${two(seconds % 60)}`
  const tenths = options.tenths ? `.${Math.floor(total / 100) % 10}` : ''
  return `${ms < 0 && total > 0 ? '\u2212' : ''}${clock}${tenths}`
}

const SECONDS = String.raw`(\d{1,9}(?:\.\d{1,9})?)`
const PLAIN_SECONDS = new RegExp(`^${SECONDS}s?$`)
const COLONS = /^(?:(\d{1,4}):(?=[0-5]?\d:))?(\d{1,4}):([0-5]\d(?:\.\d{1,9})?)$/
const UNITS = /^(?:(\d{1,4})h)?(?:(\d{1,5})m)?(?:(\d{1,7}(?:\.\d{1,9})?)s)?$/

/**
 * Reads '1:02:03', '4:05', '95', '95.5', '95s', '1h2m3s', '2m' as milliseconds, rounded to the nearest;
 * null for anything else, negative times included.
 */
export function parseClock(text: string): number | null {
  const input = text.trim().toLowerCase().replace(/\s+/g, '').replace(',', '.')
  if (input === '' || input.length > 40) return null
  const plain = PLAIN_SECONDS.exec(input)
  if (plain) return toMs('0', '0', plain[1]!)
  const match = COLONS.exec(input) ?? UNITS.exec(input)
  return match ? toMs(match[1] ?? '0', match[2] ?? '0', match[3] ?? '0') : null
}

function toMs(hours: string, minutes: string, seconds: string): number {
  const [wholeSeconds, fraction = ''] = seconds.split('.')
  // Digits, not a float product: 1.005 s is 1005 ms.
  const thousandths = Math.round(Number(fraction.padEnd(4, '0').slice(0, 4)) / 10)
  return (Number(hours) * 3600 + Number(minutes) * 60 + Number(wholeSeconds)) * 1000 + thousandths
}

/** A stretch of a clip; without an end it runs to the end of the clip. */
export interface TimeFragment { startMs: number, endMs?: number }

const NPT_CLOCK = /^(?:\d+:)?[0-5]\d:[0-5]\d(?:\.\d*)?$/
const NPT_SECONDS = /^\d+(?:\.\d*)?s?$/

/**
 * Reads the time dimension of a W3C media fragment (https://www.w3.org/TR/media-frags/#naming-time):
 * `t=12.5`, `t=npt:10,20`, `t=,20`, `#t=0:02:00`, alone or among other `&` pairs; of several the last counts.
 * Returns null where the standard says to ignore it: no `t`, another time scheme, a malformed time, an
 * end that is not after the start.
 */
export function parseTimeFragment(fragment: string): TimeFragment | null {
  const value = fragment.replace(/^[#?]/, '').slice(0, 2000).split('&')
    .map(pair => decodePair(pair))
    .filter(pair => pair?.name === 't').at(-1)?.value
  if (value === undefined) return null
  const range = value.replace(/^npt:/, '')
  const [start, end, ...more] = range.split(',')
  if (more.length > 0 || end === '') return null
  const startMs = start === '' ? (end === undefined ? null : 0) : parseNpt(start!)
  if (startMs === null) return null
  if (end === undefined) return { startMs }
  const endMs = parseNpt(end)
  return endMs !== null && endMs > startMs ? { startMs, endMs } : null
}

/** Writes `t=12.5` or `t=10,20`: seconds with no more decimals than needed. */
export function formatTimeFragment(fragment: TimeFragment): string {
  const start = formatSeconds(fragment.startMs)
  return fragment.endMs === undefined ? `t=${start}` : `t=${start},${formatSeconds(fragment.endMs)}`
}

/** Milliseconds as seconds for links: '12.5', '0', '3.007'. */
export function formatSeconds(ms: number): string {
  const whole = Math.max(0, Math.round(ms))
  return `${Math.floor(whole / 1000)}${`.${String(whole % 1000).padStart(3, '0')}`.replace(/\.?0+$/, '')}`
}

function parseNpt(text: string): number | null {
  if (text.length > 30) return null
  if (NPT_SECONDS.test(text)) return toMs('0', '0', text.replace(/s$/, ''))
  if (!NPT_CLOCK.test(text)) return null
  const [seconds, minutes, hours = '0'] = text.split(':').reverse() as [string, string, string?]
  return toMs(hours, minutes, seconds)
}

function decodePair(pair: string): { name: string, value: string } | undefined {
  const at = pair.indexOf('=')
  if (at < 0) return undefined
  try {
    return { name: decodeURIComponent(pair.slice(0, at)), value: decodeURIComponent(pair.slice(at + 1)) }
  }
  catch {
    return undefined // broken percent-encoding: the standard ignores the pair
  }
}
