/** Start and end in milliseconds. */
export interface SrtTimes { startMs: number, endMs: number }

/** `times` is absent when the caption cannot be kept; `problem` carries on the sentence "the times “…” …". */
export interface ReadTimes { times?: SrtTimes, problem?: string }

interface Clock { ms: number, negative: boolean, oddFraction: boolean, pastSixty: boolean, length: number }

const CLOCK = /^\s*(-?)\s*(?:(\d{1,9})\s*:\s*)?(\d{1,2})\s*:\s*(\d{1,2})(?:\s*[,.]\s*(\d{1,9}))?/

/**
 * Reads a line such as `00:00:01,500 --> 00:00:04,000 X1:40`, with the oddities found in real files.
 * Returns undefined for a line that merely has an arrow in its text.
 */
export function parseSrtTimes(line: string): ReadTimes | undefined {
  const arrow = line.indexOf('-->')
  if (arrow < 0 || !/\d/.test(line)) return undefined
  // Lines of times are short; a megabyte with an arrow somewhere is text.
  const left = line.slice(Math.max(0, arrow - 60), arrow).replace(/-+$/, '')
  const right = line.slice(arrow + 3, arrow + 60)
  const start = readClock(left)
  const end = readClock(right)
  if (!start || start.length !== left.trimEnd().length || !end) {
    const meant = /^\s*-?\d+\s*:/.test(left) || /^\s*-?\d+\s*:\s*\d+\s*:\s*\d/.test(right)
    return meant ? { problem: 'cannot be read, so this caption was left out.' } : undefined
  }
  return judge(start, end)
}

function judge(start: Clock, end: Clock): ReadTimes {
  if (end.negative) return { problem: 'lie before the start of the clip, so this caption was left out.' }
  const times = { startMs: start.negative ? 0 : start.ms, endMs: end.ms }
  if (start.negative) return { times, problem: 'begin before the start of the clip; this caption now starts at 0.' }
  if (start.pastSixty || end.pastSixty) return { times, problem: 'have more than 59 minutes or seconds; they were added up as they stand.' }
  if (start.oddFraction || end.oddFraction) return { times, problem: 'do not have three digits after the seconds; fewer were read as milliseconds, further ones dropped.' }
  return { times }
}

function readClock(text: string): Clock | undefined {
  const match = CLOCK.exec(text)
  if (!match) return undefined
  const [whole, sign, hours = '0', minutes, seconds, fraction = '000'] = match
  // Fewer than three digits count milliseconds (",5" is 5 ms), as common players read them.
  const ms = Number(hours) * 3_600_000 + Number(minutes) * 60_000 + Number(seconds) * 1000 + Number(fraction.slice(0, 3))
  return {
    ms,
    negative: sign === '-' && ms > 0,
    oddFraction: fraction.length !== 3,
    pastSixty: Number(minutes) > 59 || Number(seconds) > 59,
    length: whole.length,
  }
}
