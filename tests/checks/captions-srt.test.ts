import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import { ask, mediaCaptions, subtitle, type Reference } from './support/captionReferences'
import { SRT_CORPUS } from './support/srtCorpus'

// Outside sources: media-captions 1.0.4 and subtitle 4.2.2 from npm, on files of our own and on odd ones
// from cdown/srt (MIT) and sandflow/ttconv (BSD-2-Clause), see tests/fixtures/captions/SOURCE.txt.
// SubRip has no standard, so each difference is listed with what we do instead, and must be one.

const fixture = (name: string) => readFileSync(new URL(`../fixtures/captions/${name}.srt`, import.meta.url))
const FILES: Record<string, Uint8Array> = {
  ...Object.fromEntries(Object.entries(SRT_CORPUS).map(([name, text]) => [name, new TextEncoder().encode(text)])),
  ...Object.fromEntries(['ascii', 'alignment', 'extended-tags'].map(name => [name, fixture(name)])),
}

const MARKUP = { 'gives text with its markup; we give what is shown': ['looks', 'position', 'alignment', 'extended-tags'] }

const REFERENCES: { name: string, read: Reference, deviations: Record<string, string[]> }[] = [
  {
    name: 'subtitle',
    read: subtitle,
    deviations: {
      ...MARKUP,
      'keeps a stray blank line inside text; we join the lines': ['blank line inside'],
      'throws at times that cannot be read; we leave out that caption': ['bad times'],
    },
  },
  {
    name: 'media-captions',
    read: mediaCaptions('srt'),
    deviations: {
      ...MARKUP,
      'loses what follows a stray blank line; we keep it': ['blank line inside'],
      'knows hours of two digits only': ['long hours'],
      'reads ,5 as half a second; we read 5 ms, as subtitle and ffmpeg do': ['few digits of milliseconds'],
      'takes place codes for text': ['place codes'],
    },
  },
]

describe.each(REFERENCES)('$name', ({ read, deviations }) => {
  const reasons = new Map(Object.entries(deviations).flatMap(([reason, files]) => files.map(file => [file, reason] as const)))

  it.each(Object.entries(FILES))('%s', async (file, bytes) => {
    const times = (cue: { startMs: number, endMs: number, text: string }) => [cue.startMs, cue.endMs, cue.text]
    const ours = readCaptions(bytes, { name: 'file.srt' }).cues.map(times)
    const answer = await ask(read, new TextDecoder().decode(bytes))
    const theirs = typeof answer === 'string' ? answer : answer.map(times)
    const reason = reasons.get(file)
    if (reason) expect(theirs, `no longer true: ${reason}`).not.toEqual(ours)
    else expect(theirs).toEqual(ours)
  })
})

describe('the odd files themselves', () => {
  it('lose their position codes', () => {
    const { cues, warnings } = readCaptions(fixture('alignment'))
    expect(cues.map(cue => cue.text)).toEqual(['Bottom', 'Center', 'Top'].flatMap(v => ['Left', 'Center', 'Right'].map(h => `V: ${v} - H: ${h}`)))
    expect(warnings).toEqual([])
  })

  it('lose tags of other makes, with a warning', () => {
    const { cues, warnings } = readCaptions(fixture('extended-tags'))
    expect(cues).toEqual([{ id: '1', startMs: 136_612, endMs: 139_376, text: 'Hello my name is Bob' }])
    expect(warnings).toEqual([expect.stringContaining('“<bold>” is not caption markup')])
  })

  it('in an encoding that we do not know keep their times, with a warning', () => {
    const { cues, warnings, encoding } = readCaptions(fixture('gb2312'))
    expect(encoding).toBe('windows-1252')
    expect(cues.map(cue => [cue.id, cue.startMs, cue.endMs])).toEqual([['2', 27_000, 30_730], ['4', 31_500, 34_100], ['6', 34_100, 36_570]])
    expect(warnings).toEqual([expect.stringContaining('save it as UTF-8')])
  })
})
