import type { Cue } from '#shared/types/captions'
import { decodeReferences } from './cueText'
import { parseSrtTimes, type SrtTimes } from './subripTimes'
import { excerpt, type WarningList } from './warnings'

/**
 * Reads SubRip (.srt) captions. The format has no standard, so this takes what programs and people
 * really write: missing or repeated numbers, commas or full stops, one-digit hours, blank lines in the
 * wrong places, position codes and font tags (removed). What cannot be read is left out with a warning.
 */

/** Formatting tags that were never more than looks. */
const LOOKS_TAGS = new Set(['b', 'i', 'u', 's', 'font', 'br', 'c', 'v', 'ruby', 'rt'])

const INDEX_LINE = /^\s*\d{1,12}\s*$/

/** Cues in file order, the number before each as its id; empty when there is none. */
export function readSrt(text: string, warnings: WarningList): Cue[] {
  const lines = text.replaceAll('\0', '\uFFFD').replaceAll('\r\n', '\n').replaceAll('\r', '\n').split('\n')
  const headings = findHeadings(lines, warnings)
  warnPreamble(lines, headings[0]?.firstLine ?? lines.length, warnings)
  const cues: Cue[] = []
  headings.forEach((heading, i) => {
    const end = headings[i + 1]?.firstLine ?? lines.length
    const { times } = heading
    if (!times) return // said when the heading was found
    const text = collectText(lines, heading.timeLine + 1, end, warnings)
    cues.push({ id: heading.id, startMs: times.startMs, endMs: times.endMs, text })
  })
  return cues
}

interface Heading {
  id: string
  /** The number's line, or the times' line where there is no number. */
  firstLine: number
  timeLine: number
  times?: SrtTimes
}

/** Finds every line of times, with the number above it. */
function findHeadings(lines: string[], warnings: WarningList): Heading[] {
  const headings: Heading[] = []
  lines.forEach((line, index) => {
    const read = line.includes('-->') ? parseSrtTimes(line) : undefined
    if (!read) return
    const previous = headings.at(-1)
    const hasId = isIndexOf(lines, index, previous)
    if (read.problem) warnings.add(() => `Line ${index + 1}: the times “${excerpt(line)}” ${read.problem}`)
    headings.push({
      id: hasId ? lines[index - 1]!.trim() : '',
      firstLine: hasId ? index - 1 : index,
      timeLine: index,
      times: read.times,
    })
  })
  return headings
}

/** Whether the line above the times is a caption's number and not the last line of the caption before. */
function isIndexOf(lines: string[], timeLine: number, previous: Heading | undefined): boolean {
  const above = lines[timeLine - 1]
  if (above === undefined || !INDEX_LINE.test(above)) return false
  if (previous && previous.timeLine === timeLine - 1) return false
  const before = lines[timeLine - 2]
  if (before === undefined || before.trim() === '') return true
  // No blank line: believe the number only if it carries on the count.
  return previous !== undefined && Number(above) > Number(previous.id)
}

function warnPreamble(lines: string[], end: number, warnings: WarningList): void {
  const first = lines.slice(0, end).findIndex(line => line.trim() !== '')
  if (first >= 0) warnings.add(() => `Line ${first + 1}: “${excerpt(lines[first]!)}” comes before the first times, so it was left out.`)
}

function collectText(lines: string[], from: number, end: number, warnings: WarningList): string {
  const kept: string[] = []
  let afterBlank = false
  let foreign: string | undefined
  for (let i = from; i < end; i++) {
    const line = lines[i]!
    if (line.trim() === '') {
      afterBlank = kept.length > 0
      continue
    }
    if (afterBlank) warnings.add(() => `Line ${i + 1}: “${excerpt(line)}” stands after a blank line without times of its own; it was kept with the caption above.`)
    afterBlank = false
    const plain = plainSrtLine(line)
    foreign ??= plain.foreignTag
    kept.push(plain.text)
  }
  if (foreign) warnings.add(() => `Line ${from + 1}: “${excerpt(foreign)}” is not caption markup and was removed; the words around it were kept.`)
  return kept.join('\n')
}

/** Each piece starts at its own mark and may not contain that mark again, so that matching stays linear. */
const MARKUP = /<(\/?)([A-Za-z][\w.:-]*)(\s[^<>]*|\/)?>|\{\\[^{}]*\}/g

function plainSrtLine(line: string): { text: string, foreignTag?: string } {
  if (!/[<{&]/.test(line)) return { text: line }
  let foreignTag: string | undefined
  const text = line.replace(MARKUP, (tag: string, _slash: string | undefined, name: string | undefined) => {
    if (name !== undefined && !LOOKS_TAGS.has(name.toLowerCase().split('.')[0]!)) foreignTag ??= tag
    return ''
  })
  return { text: decodeReferences(text), foreignTag }
}
