import { describe, expect, it } from 'vitest'
import { MAX_CAPTION_BYTES, readCaptions } from '#server/indexing/captions/readCaptions'
import { MAX_CAPTION_WARNINGS } from '#server/indexing/captions/warnings'
import { DomainError } from '#shared/utils/errors'
import { bytesOf, read, rows } from './support'

const SRT = '1\n00:00:01,000 --> 00:00:02,000\ncafé “plank” – 1½\n'
const VTT = 'WEBVTT\n\n00:01.000 --> 00:02.000\ncafé “plank” – 1½\n'
const TEXT = 'café “plank” – 1½'

function utf16(text: string, bigEndian: boolean, mark: boolean): Uint8Array {
  const bytes = Buffer.from(`${mark ? '\uFEFF' : ''}${text}`, 'utf16le')
  return bigEndian ? bytes.swap16() : bytes
}

/** The few letters of these tests in Windows-1252. */
function windows1252(text: string): Uint8Array {
  const codes: Record<string, number> = { '“': 0x93, '”': 0x94, '–': 0x96 }
  return Uint8Array.from([...text], letter => codes[letter] ?? letter.charCodeAt(0))
}

describe('encodings', () => {
  it.each([
    ['UTF-8', bytesOf, 'utf-8'],
    ['UTF-8 with a byte order mark', (t: string) => bytesOf(`\uFEFF${t}`), 'utf-8'],
    ['UTF-16 LE with a mark', (t: string) => utf16(t, false, true), 'utf-16le'],
    ['UTF-16 BE with a mark', (t: string) => utf16(t, true, true), 'utf-16be'],
    ['UTF-16 LE without', (t: string) => utf16(t, false, false), 'utf-16le'],
    ['UTF-16 BE without', (t: string) => utf16(t, true, false), 'utf-16be'],
    ['Windows-1252', windows1252, 'windows-1252'],
  ] as const)('%s', (_name, encode, encoding) => {
    for (const [file, format] of [[SRT, 'srt'], [VTT, 'vtt']] as const) {
      const reading = readCaptions(encode(file))
      expect(reading).toMatchObject({ format, encoding })
      expect(reading.cues.map(cue => [cue.startMs, cue.endMs, cue.text])).toEqual([[1000, 2000, TEXT]])
      expect(reading.warnings).toEqual(encoding === 'windows-1252' ? [expect.stringMatching(/read as Windows-1252/)] : [])
    }
  })

  it('keeps damaged UTF-8 as UTF-8', () => {
    const bytes = Uint8Array.from([...bytesOf('WEBVTT\n\n00:01.000 --> 00:02.000\nžluťoučký kůň '), 0xFF, 0xE2, 0x80])
    const reading = readCaptions(bytes)
    expect(reading.encoding).toBe('utf-8')
    expect(reading.cues[0]!.text).toBe('žluťoučký kůň \uFFFD\uFFFD')
    expect(reading.warnings[0]).toMatch(/damaged/)
  })

  it('says when a two-byte file is cut in the middle of a letter', () => {
    const reading = readCaptions(utf16(VTT, false, true).slice(0, -1))
    expect(reading.warnings[0]).toMatch(/damaged/)
    expect(reading.cues).toHaveLength(1)
  })

  it('does not take NULs in a WebVTT file for UTF-16', () => {
    expect(rows(read('WEBVTT\n\n00:01.000 --> 00:02.000\n-\0-\0>\0').cues)).toEqual([['', 1000, 2000, '-\uFFFD-\uFFFD>\uFFFD']])
  })
})

describe('formats', () => {
  it.each([
    ['a signature, whatever the name', 'WEBVTT\n\n00:01.000 --> 00:02.000\nx', 'a.srt', 'vtt'],
    ['commas, whatever the name', '1\n00:00:01,000 --> 00:00:02,000\nx', 'a.vtt', 'srt'],
    ['full stops and numbers without a name', '1\n00:00:01.000 --> 00:00:02.000\nx', undefined, 'srt'],
    ['full stops under .srt', '00:00:01.000 --> 00:00:02.000\nx', 'A.SRT', 'srt'],
  ])('are told by %s', (_name, text, name, format) => {
    const reading = readCaptions(bytesOf(text), { name })
    expect(reading.format).toBe(format)
    expect(reading.cues).toHaveLength(1)
  })

  it.each([
    ['full stops under .vtt', '1\n00:00:01.000 --> 00:00:02.000\nx', 'a.vtt'],
    ['full stops without numbers or name', '00:01.000 --> 00:02.000\nx', undefined],
    ['a broken signature before commas', 'WEBVTTX\n\n00:00:01,000 --> 00:00:02,000\nx', 'a.vtt'],
  ])('without a signature: %s is WebVTT that cannot be read', (_name, text, name) => {
    expect(() => readCaptions(bytesOf(text), { name })).toThrowError(/starts with “WEBVTT”/)
  })
})

describe('refusals', () => {
  const codeOf = (bytes: Uint8Array, name?: string): string => {
    try {
      readCaptions(bytes, { name })
      return 'none'
    }
    catch (error) {
      return error instanceof DomainError ? `${error.code}: ${error.message}` : String(error)
    }
  }

  it.each([
    ['nothing', new Uint8Array(), /^unreadable: .*empty/],
    ['blank lines', bytesOf('\n\n \n'), /^unreadable: .*empty/],
    ['a mark alone', Uint8Array.of(0xEF, 0xBB, 0xBF), /^unreadable: .*empty/],
    ['prose', bytesOf('Dear builder, I liked the film.'), /^unreadable: .*No line with two times/],
    ['a picture', Uint8Array.from({ length: 5000 }, (_, i) => (i * 7919 + (i >> 3)) % 256), /^unreadable: .*does not hold text/],
    ['a start of MP4', Uint8Array.from([0, 0, 0, 32, ...bytesOf('ftypisom'), ...new Uint8Array(500)]), /^unreadable: .*does not hold text/],
    ['5 MB and a byte', new Uint8Array(MAX_CAPTION_BYTES + 1), /^too-large: The file has 5 MB; caption files may have 5 MB at most/],
    ['10 MB', new Uint8Array(10 * 1024 * 1024), /^too-large: The file has 10 MB/],
  ])('of %s say why', (_name, bytes, expected) => {
    for (const name of ['a.srt', 'a.bin', undefined]) expect(codeOf(bytes, name)).toMatch(expected)
  })
})

describe('warnings', () => {
  it('stop at fifty and count the rest', () => {
    const bad = Array.from({ length: 80 }, (_, i) => `00:00,000 --> ${i}\nlost`).join('\n\n')
    const { warnings } = read(`WEBVTT\n\n${bad}\n\n00:01.000 --> 00:02.000\nkept`)
    expect(warnings).toHaveLength(MAX_CAPTION_WARNINGS + 1)
    expect(warnings.at(-1)).toBe('and 30 more')
  })

  it('hold no control characters and no endless lines of the file', () => {
    const { warnings } = read(`WEBVTT\n\n${'x\u001B[31m'.repeat(1000)}\n\n00:01.000 --> 00:02.000\nkept`)
    expect(warnings).toHaveLength(1)
    expect(warnings[0]!.length).toBeLessThan(120)
    expect(warnings[0]).not.toMatch(/\p{Cc}/u)
  })
})

describe('pathological files are read', { timeout: 60_000 }, () => {
  // None of these may take more than linear time; a quadratic reading of 2 MB would run for an hour.
  const fill = (piece: string) => piece.repeat(Math.floor(2_000_000 / new TextEncoder().encode(piece).length))
  const cue = 'WEBVTT\n\n00:00.000 --> 00:01.000\n'
  const srt = '1\n00:00:00,000 --> 00:00:01,000\n'

  it.each([
    ['open brackets', `${cue}${fill('<')}`],
    ['open tags', `${cue}${fill('<b>')}`],
    ['closed brackets', `${cue}${fill('<>')}`],
    ['ampersands', `${cue}${fill('&')}`],
    ['half references', `${cue}${fill('&am')}`],
    ['one endless reference', `${cue}&#${fill('9')}`],
    ['one endless name', `${cue}&${fill('a')}`],
    ['dashes', `${cue}${fill('-')}`],
    ['arrows on one line', `WEBVTT\n\n${fill('-->')}`],
    ['arrows on lines of their own', `WEBVTT\n\n${fill('-->\n')}`],
    ['blank lines', `WEBVTT\n\n${fill('\n')}`],
    ['spaces before times', `WEBVTT\n\n${fill(' ')}--> 00:01.000`],
    ['endless hours', `WEBVTT\n\n${fill('9')}:00:00.000 --> 00:01.000`],
    ['short cues', `WEBVTT\n\n${fill('00:00.000 --> 00:01.000\n\n')}`],
    ['SubRip: open brackets', `${srt}${fill('<')}`],
    ['SubRip: open tags', `${srt}${fill('<a ')}`],
    ['SubRip: open braces', `${srt}${fill('{\\')}`],
    ['SubRip: one endless tag', `${srt}<${fill('a')}`],
    ['SubRip: blanks', `${srt}${fill(' ')}`],
    ['SubRip: digits', `${srt}${fill('1\n')}`],
    ['SubRip: arrows on lines of their own', `${srt}${fill('-->\n')}`],
    ['SubRip: arrows on one line', `${srt}${fill('-->')}`],
    ['SubRip: short cues', fill('00:00:00,000 --> 00:00:01,000\n\n')],
  ])('%s', (_name, file) => {
    expect(readCaptions(bytesOf(file)).format).toMatch(/vtt|srt/)
  })
})
