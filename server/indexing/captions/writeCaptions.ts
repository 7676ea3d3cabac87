import type { Cue } from '#shared/types/captions'
import { DomainError } from '#shared/utils/errors'

/**
 * Writes WebVTT (https://www.w3.org/TR/webvtt1/#file-structure). Reading it back gives the same times
 * and text, and the same ids as far as an id can be written: line breaks in it become spaces and an
 * arrow loses a dash. Cues are written in the order given; the format asks for that of their starts.
 *
 * @param options.chaptersKind for `<track kind="chapters">`: every title on one line
 * @throws DomainError 'bad-input' when a time is negative or not a whole number of milliseconds
 */
export function writeVtt(cues: readonly Cue[], options: { chaptersKind?: boolean } = {}): string {
  const blocks = cues.map((cue) => {
    const id = cue.id.replace(/[\r\n]+/g, ' ').replace(/-+->/g, '->').replaceAll('\0', '\uFFFD')
    const text = options.chaptersKind ? cue.text.replace(/\s+/g, ' ').trim() : cue.text
    const lines = [`${stamp(cue.startMs, '.')} --> ${stamp(cue.endMs, '.')}`]
    if (id !== '') lines.unshift(id)
    if (text !== '') lines.push(escapeVtt(text))
    return lines.join('\n')
  })
  return `${['WEBVTT', ...blocks].join('\n\n')}\n`
}

/**
 * Writes SubRip, numbered from 1. The format has no escapes of its own; the few places where text
 * would be taken for markup, times or the end of a caption are written as HTML character references,
 * which `readCaptions` takes back.
 *
 * @throws DomainError 'bad-input' when a time is negative or not a whole number of milliseconds
 */
export function writeSrt(cues: readonly Cue[]): string {
  return cues.map((cue, i) => `${i + 1}\n${stamp(cue.startMs, ',')} --> ${stamp(cue.endMs, ',')}\n${escapeSrt(cue.text)}\n`).join('\n')
}

function escapeVtt(text: string): string {
  return keepEmptyLines(text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;'))
}

function escapeSrt(text: string): string {
  const marked = text
    .replace(/&(?=[#A-Za-z])/g, '&amp;')
    .replace(/<(?=[/A-Za-z])/g, '&lt;')
    .replaceAll('-->', '--&gt;')
    .replaceAll('{\\', '&#123;\\')
  // A line of blanks alone would separate captions.
  const lines = marked.split('\n').map(line => line !== '' && line.trim() === '' ? `&#${line.charCodeAt(0)};${line.slice(1)}` : line)
  return keepEmptyLines(lines.join('\n'))
}

/** An empty line ends a caption, so its line feed is written as a reference: `a`, empty, `b` → `a` / `&#10;b`. */
function keepEmptyLines(text: string): string {
  return text
    .replaceAll('\0', '\uFFFD')
    .replaceAll('\r', '&#13;')
    .replace(/^\n+|\n+$|(?<=\n)\n+/g, breaks => '&#10;'.repeat(breaks.length))
}

function stamp(ms: number, decimal: '.' | ','): string {
  if (!Number.isSafeInteger(ms) || ms < 0) {
    throw new DomainError('bad-input', `A caption has the time ${ms}. Times are whole milliseconds from 0 on. Nothing was written.`)
  }
  const pad = (n: number, width: number) => String(n).padStart(width, '0')
  const seconds = Math.floor(ms / 1000)
  return `${pad(Math.floor(seconds / 3600), 2)}:${pad(Math.floor(seconds / 60) % 60, 2)}:${pad(seconds % 60, 2)}${decimal}${pad(ms % 1000, 3)}`
}
