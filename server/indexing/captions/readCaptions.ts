import type { CaptionReading, Cue } from '#shared/types/captions'
import { DomainError } from '#shared/utils/errors'
import { decodeCaptionBytes, looksBinary } from './encoding'
import { warnAboutTimes } from './order'
import { readSrt } from './subrip'
import { parseSrtTimes } from './subripTimes'
import { excerpt, WarningList } from './warnings'
import { hasVttSignature, readVtt } from './webvtt'

/** Larger than the captions of any clip: 5 MB is about 100 hours of speech. */
export const MAX_CAPTION_BYTES = 5 * 1024 * 1024

/**
 * Reads a caption file, WebVTT or SubRip, told apart by what is in it.
 *
 * Odd content never throws: it is kept or left out with a warning that says so. Cues come in file
 * order; `orderCues` puts them in time order. Times are integer milliseconds; a cue may end before it
 * starts (see `cuesForStorage`).
 *
 * @param options.name file name, used only where the content leaves the format open
 * @throws DomainError 'too-large' above MAX_CAPTION_BYTES, 'unreadable' when there are no captions to be read
 */
export function readCaptions(bytes: Uint8Array, options: { name?: string } = {}): CaptionReading {
  if (bytes.byteLength > MAX_CAPTION_BYTES) {
    throw new DomainError('too-large', `The file has ${megabytes(bytes.byteLength)} MB; caption files may have ${megabytes(MAX_CAPTION_BYTES)} MB at most. It was not read. Check that it is a caption file.`)
  }
  const { text, encoding, warning } = decodeCaptionBytes(bytes)
  if (text.trim() === '') throw unreadable('The file is empty.')
  const warnings = new WarningList()
  if (warning) warnings.add(() => warning)

  const format = tellFormat(text, options.name)
  const cues = format === 'vtt' ? readAsVtt(text, warnings) : readAsSrt(text, warnings)
  warnAboutTimes(cues, warnings)
  return { cues, warnings: warnings.toArray(), format, encoding }
}

function readAsVtt(text: string, warnings: WarningList): Cue[] {
  const cues = readVtt(text, warnings)
  if (!cues) {
    if (looksBinary(text)) throw unreadable('The file does not hold text.')
    const opening = excerpt(text.slice(0, 200).split(/[\r\n]/)[0]!)
    throw unreadable(`A WebVTT file starts with “WEBVTT” on a line of its own or followed by a space; this one starts with ${opening ? `“${opening}”` : 'an empty line'}.`)
  }
  if (cues.length === 0) warnings.add(() => 'The file is WebVTT but holds no caption that can be read.')
  return cues
}

function readAsSrt(text: string, warnings: WarningList): Cue[] {
  const cues = readSrt(text, warnings)
  if (cues.length > 0) return cues
  throw unreadable(looksBinary(text) ? 'The file does not hold text.' : 'No line with two times and an arrow between them (00:00:01,000 --> 00:00:04,000) was found in it.')
}

/**
 * The signature decides; without it the first line of times does, as SubRip alone has commas there.
 * With full stops and no signature the file is SubRip if it is called so, or if it is not called
 * .vtt and numbers its captions.
 */
function tellFormat(text: string, name = ''): 'vtt' | 'srt' {
  if (hasVttSignature(text)) return 'vtt'
  if (/\.srt$/i.test(name)) return 'srt'
  if (/^[\s\uFEFF]*WEBVTT/i.test(text.slice(0, 100))) return 'vtt'
  const first = firstTimes(text)
  if (first && /\d,\d/.test(first.line)) return 'srt'
  if (/\.vtt$/i.test(name)) return 'vtt'
  return first && !first.numbered ? 'vtt' : 'srt'
}

function firstTimes(text: string): { line: string, numbered: boolean } | undefined {
  let at = text.indexOf('-->')
  for (let tries = 0; at >= 0 && tries < 100; tries++, at = text.indexOf('-->', at + 3)) {
    const near = text.slice(Math.max(0, at - 80), at + 40)
    const before = near.slice(0, Math.min(at, 80)).split(/[\r\n]+/)
    const line = `${before.at(-1)}${near.slice(Math.min(at, 80)).split(/[\r\n]/)[0]}`
    if (parseSrtTimes(line)) return { line, numbered: /^\s*\d+\s*$/.test(before.at(-2) ?? '') }
  }
  return undefined
}

function unreadable(reason: string): DomainError {
  return new DomainError('unreadable', `No captions could be read. ${reason} Nothing was changed.`)
}

function megabytes(bytes: number): string {
  return (bytes / (1024 * 1024)).toFixed(1).replace(/\.0$/, '')
}
