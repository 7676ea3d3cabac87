import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import { writeSrt, writeVtt } from '#server/indexing/captions/writeCaptions'
import type { Cue } from '#shared/types/captions'
import { bytesOf } from './support'

const cue = (text: string, id = '', startMs = 0, endMs = 1000): Cue => ({ id, startMs, endMs, text })

/** Text full of what the formats give a meaning to. NUL cannot be written in either; half a letter is no text. */
const awkward = fc.array(fc.oneof(
  fc.constantFrom('\n', '\n\n', '\r', ' ', '\t', '<', '>', '&', '-->', '--', '{\\an8}', '{', '<b>', '</i>', '&amp;', '&lt', '&#10;', '1', '42', 'NOTE', 'WEBVTT', '00:00:01,000 --> 00:00:02,000', '00:01.000 --> 00:02.000', '\u00A0', '\uFEFF', '\u2028', '½', '船'),
  fc.string({ unit: 'grapheme', maxLength: 8 }).map(text => text.replaceAll('\0', '')),
), { maxLength: 8 }).map(parts => parts.join(''))
const anId = fc.string({ unit: 'grapheme', maxLength: 12 }).map(id => id.replace(/-->|[\0\r\n]/g, ''))
const aTime = fc.integer({ min: 0, max: 400 * 3_600_000 })
const cues = fc.array(fc.record({ id: anId, startMs: aTime, endMs: aTime, text: awkward }), { minLength: 1, maxLength: 6 })

describe('what is written is read back the same', () => {
  it('as WebVTT', () => {
    fc.assert(fc.property(cues, (written) => {
      expect(readCaptions(bytesOf(writeVtt(written))).cues).toEqual(written)
    }), { numRuns: 1000 })
  })

  it('as SubRip, numbered from 1', () => {
    fc.assert(fc.property(cues, (written) => {
      const numbered = written.map((one, i) => ({ ...one, id: String(i + 1) }))
      expect(readCaptions(bytesOf(writeSrt(written)), { name: 'a.srt' }).cues).toEqual(numbered)
    }), { numRuns: 1000 })
  })
})

describe('writeVtt', () => {
  it('writes ids, hours of two digits, and escapes', () => {
    expect(writeVtt([cue('Tom & <i>', 'first'), cue('a --> b\n\nc', '', 3_723_004, 360_000_000)]))
      .toBe('WEBVTT\n\nfirst\n00:00:00.000 --> 00:00:01.000\nTom &amp; &lt;i&gt;\n\n01:02:03.004 --> 100:00:00.000\na --&gt; b\n&#10;c\n')
  })

  it('is valid without cues', () => {
    expect(writeVtt([])).toBe('WEBVTT\n')
  })

  it('mends ids that cannot be written', () => {
    const [back] = readCaptions(bytesOf(writeVtt([cue('text', 'a --> b\nc')]))).cues
    expect(back).toEqual(cue('text', 'a -> b c'))
  })

  it('puts chapter titles on one line', () => {
    expect(writeVtt([cue(' Glue\n\nthe transom ')], { chaptersKind: true })).toBe('WEBVTT\n\n00:00:00.000 --> 00:00:01.000\nGlue the transom\n')
  })
})

describe('writeSrt', () => {
  it('leaves ordinary signs alone', () => {
    expect(writeSrt([cue('5 < 6 & 1" > ½"'), cue('{x} <3')])).toBe('1\n00:00:00,000 --> 00:00:01,000\n5 < 6 & 1" > ½"\n\n2\n00:00:00,000 --> 00:00:01,000\n{x} <3\n')
  })
})

it.each([-1, 0.5, Number.NaN, Number.POSITIVE_INFINITY])('neither writes the time %d', (ms) => {
  expect(() => writeVtt([cue('x', '', ms)])).toThrowError(/whole milliseconds/)
  expect(() => writeSrt([cue('x', '', 0, ms)])).toThrowError(/whole milliseconds/)
})
