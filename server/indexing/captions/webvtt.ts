import type { Cue } from '#shared/types/captions'
import { plainCueText } from './cueText'
import { excerpt, type WarningList } from './warnings'

/**
 * Reads WebVTT by the W3C parser algorithm (https://www.w3.org/TR/webvtt1/#file-parsing).
 *
 * Our own rather than a package because the packages fall short of the algorithm (NUL, lines that
 * hold an arrow, character references) and none says what it left out. Names follow the standard, so
 * that the two can be laid side by side. Cue settings, regions and style sheets have no bearing on
 * times, ids or text and are passed over; a cue that ends before it starts is kept, as the algorithm
 * keeps it.
 */

/** Times beyond this cannot be kept exactly; the algorithm itself has no limit. */
const MAX_MS = Number.MAX_SAFE_INTEGER

const NAMED_BLOCK = /^(?:NOTE|STYLE|REGION)(?:[ \t]|$)/

/** True when text (with its byte order mark removed) has the WebVTT signature. */
export function hasVttSignature(text: string): boolean {
  return /^WEBVTT(?:[ \t\n\r]|$)/.test(text.slice(0, 7))
}

/** Cues in file order; undefined when the signature is missing, where the algorithm aborts. */
export function readVtt(text: string, warnings: WarningList): Cue[] | undefined {
  const input = text.replaceAll('\0', '\uFFFD').replaceAll('\r\n', '\n').replaceAll('\r', '\n')
  if (!hasVttSignature(input)) return undefined
  const lines = input.split('\n')
  // A line feed at the very end closes the last line; it does not open another.
  if (lines.at(-1) === '') lines.pop()
  const reader: BlockReader = { lines, next: 1, warnings }
  if (lines[1] === '') reader.next = 2
  else if (lines.length > 1) collectBlock(reader, true)

  const cues: Cue[] = []
  for (skipBlank(reader); reader.next < lines.length; skipBlank(reader)) {
    const cue = collectBlock(reader, false)
    if (cue) cues.push(cue)
  }
  return cues
}

interface BlockReader { readonly lines: string[], next: number, readonly warnings: WarningList }

function skipBlank(reader: BlockReader): void {
  while (reader.lines[reader.next] === '') reader.next++
}

/** "Collect a WebVTT block": one cue, or one stretch of lines without any. Leaves `next` after it. */
function collectBlock(reader: BlockReader, inHeader: boolean): Cue | undefined {
  const first = reader.next
  const buffer: string[] = []
  let cue: Cue | undefined
  let arrowLine = -1
  for (let lineCount = 1; reader.next < reader.lines.length; lineCount++) {
    const line = reader.lines[reader.next]!
    if (line.includes('-->')) {
      const opensCue = !inHeader && (lineCount === 1 || (lineCount === 2 && arrowLine < 0))
      if (!opensCue) {
        if (cue && buffer.length > 0) warnNoBlankLine(reader.warnings, reader.next)
        break // the same line is looked at again as the start of the next block
      }
      arrowLine = reader.next++
      const times = collectTimings(line)
      if (times) cue = { id: buffer.join('\n'), ...times, text: '' }
      else warnUnreadableTime(reader.warnings, arrowLine, line)
      if (times) buffer.length = 0
      continue
    }
    reader.next++
    if (line === '') break
    buffer.push(line)
  }
  if (!cue) {
    if (!inHeader && arrowLine < 0 && !NAMED_BLOCK.test(buffer[0] ?? '')) warnNoTime(reader.warnings, first, buffer)
    return undefined
  }
  const { text, foreignTag } = plainCueText(buffer.join('\n'))
  cue.text = text
  if (foreignTag) {
    reader.warnings.add(() => `Line ${arrowLine + 2}: “${excerpt(foreignTag)}” is not caption markup and was removed; the words around it were kept.`)
  }
  return cue
}

function warnUnreadableTime(warnings: WarningList, index: number, line: string): void {
  const hint = /\d,\d{3}/.test(line.slice(0, 60)) ? ' (WebVTT wants a full stop before the milliseconds, not a comma)' : ''
  warnings.add(() => `Line ${index + 1}: the times “${excerpt(line)}” cannot be read${hint}, so this caption was left out.`)
}

function warnNoBlankLine(warnings: WarningList, index: number): void {
  warnings.add(() => `Line ${index + 1}: no blank line comes before this caption, so the line above it was read as text of the caption before.`)
}

function warnNoTime(warnings: WarningList, index: number, buffer: string[]): void {
  warnings.add(() => `Line ${index + 1}: “${excerpt(buffer[0] ?? '')}” has no times, so it was left out.`)
}

/**
 * "Collect WebVTT cue timings and settings", without the settings: whitespace, a timestamp, whitespace, an
 * arrow, whitespace, a timestamp, and anything. Each part can match in one way only, so it is linear.
 */
const TIMESTAMP = String.raw`(\d+):(\d\d)(?!\d)(?::(\d\d)(?!\d))?\.(\d{3})(?!\d)`
const SPACE = String.raw`[ \t\n\f\r]*`
const TIMINGS = new RegExp(`^${SPACE}${TIMESTAMP}${SPACE}-->${SPACE}${TIMESTAMP}`)

function collectTimings(line: string): { startMs: number, endMs: number } | undefined {
  const match = TIMINGS.exec(line)
  if (!match) return undefined
  const startMs = milliseconds(match[1]!, match[2]!, match[3], match[4]!)
  const endMs = milliseconds(match[5]!, match[6]!, match[7], match[8]!)
  return startMs === undefined || endMs === undefined ? undefined : { startMs, endMs }
}

/** The last steps of "collect a WebVTT timestamp"; undefined where it returns an error. */
function milliseconds(first: string, second: string, third: string | undefined, thousandths: string): number | undefined {
  // Without hours the first number is minutes, and must look like them: two digits, up to 59.
  if (third === undefined && first.length !== 2) return undefined
  const [hours, minutes, seconds] = third === undefined ? [0, Number(first), Number(second)] : [Number(first), Number(second), Number(third)]
  if (minutes > 59 || seconds > 59) return undefined
  return Math.min(hours * 3_600_000 + minutes * 60_000 + seconds * 1000 + Number(thousandths), MAX_MS)
}
