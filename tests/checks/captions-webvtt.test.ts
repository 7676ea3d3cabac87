import { describe, expect, it } from 'vitest'
import { ask, mediaCaptions, nodeWebvtt, subtitle, webvttParser, type Reference } from './support/captionReferences'
import { oursInPlayerOrder } from './support/oursInPlayerOrder'
import { VTT_CORPUS } from './support/vttCorpus'

// Outside sources: webvtt-parser 2.2.0, media-captions 1.0.4, node-webvtt 1.9.4 and subtitle 4.2.2 from npm.
// What is right is decided by "WebVTT: The Web Video Text Tracks Format" (W3C), section 6. Where a reader
// departs from it, the file is listed with the reason, and the test makes sure that it still does.

type Deviations = Record<string, string[]>

const WITH_MARKUP = ['tags', 'foreign tags', 'named references', 'ampersand reference', 'other references', 'half-written references', 'references to no character', 'references cut by a tag', 'tags cut short', 'tags that hold anything', 'ruby', 'end tags out of order']

const REFERENCES: { name: string, read: Reference, keepsIds: boolean, deviations: Deviations }[] = [
  {
    name: 'webvtt-parser',
    read: webvttParser,
    keepsIds: true,
    deviations: {
      'takes NOTE and STYLE for blocks before it looks for an arrow on the next line; the standard has no step for NOTE at all': ['note as id', 'style as id'],
      'makes the second of two lines the id; the standard ends the block at an arrow on the third line': ['id of two lines'],
      'leaves the semicolon of a reference, knows six names, and reads no hexadecimal ones; the standard decodes as HTML does': ['named references', 'ampersand reference', 'other references', 'half-written references', 'references to no character'],
    },
  },
  {
    name: 'media-captions',
    read: mediaCaptions('vtt'),
    keepsIds: true,
    deviations: {
      'gives text with its markup': WITH_MARKUP,
      'reads on without a signature; the standard stops': ['signature run on', 'signature in small letters', 'signature after a blank line', 'two byte order marks'],
      'loses a cue at the end of the header': ['header with times'],
      'takes NOTE and REGION for blocks before it looks for an arrow on the next line': ['note as id', 'style as id'],
      'wants blanks round the arrow and the times, and no form feeds': ['no space before settings', 'no spaces at the arrow', 'space before the times', 'form feeds', 'end time run on'],
      'does not end the text at an arrow': ['arrow ends the text', 'arrow without times', 'two lines of times', 'bad times under an id'],
      'makes the second of two lines the id': ['id of two lines'],
      'takes two digits of milliseconds, no three-digit hours, and a no-break space': ['two digits of milliseconds', 'hours of three digits', 'no-break space in the times'],
      'drops a cue that ends before it starts; no step of the standard does': ['end before start'],
      'does not replace NUL': ['NUL'],
      'gives file order, not text track cue order': ['order of cues'],
    },
  },
  {
    name: 'node-webvtt',
    read: nodeWebvtt,
    keepsIds: true,
    deviations: {
      'gives text with its markup': WITH_MARKUP,
      'throws where the signature is wrong; the standard gives no cues': ['signature run on', 'signature in small letters'],
      'removes what stands before the signature': ['signature after a blank line', 'two byte order marks'],
      'loses a cue at the end of the header': ['header with times'],
      'takes every block that begins with NOTE for a comment': ['note as id'],
      'wants one space on each side of the arrow': ['no spaces at the arrow', 'tabs at the arrow', 'form feeds'],
      'splits at blank lines only, and tells ids by place': ['arrow ends the text', 'arrow without times', 'two lines of times', 'bad times under an id', 'id of two lines'],
      'takes minutes and seconds over 59, other numbers of digits, and a minus': ['minutes over 59', 'seconds over 59', 'two digits of milliseconds', 'four digits of milliseconds', 'minus'],
      'drops a cue that ends before it starts, and cues without text': ['end before start', 'no text at the end of the file', 'no text between cues', 'line feed, carriage return'],
      'does not replace NUL': ['NUL'],
      'gives file order, not text track cue order': ['order of cues'],
    },
  },
  {
    name: 'subtitle',
    read: subtitle,
    keepsIds: false,
    deviations: {
      'gives text with its markup': WITH_MARKUP,
      'knows ids only as numbers': ['ids', 'note as id', 'id of two lines', 'NUL', 'bad times under an id'],
      'takes anything that begins with WEBVTT, and throws at anything else': ['signature run on', 'signature in small letters', 'signature after a blank line', 'two byte order marks'],
      'does not know CR as a line end': ['CR', 'line feed, carriage return'],
      'throws at blocks without cues, at cues in the header and at extra blank lines': ['header with times', 'style and region', 'style after a cue', 'style as id', 'many blank lines', 'forgotten words'],
      'wants one space on each side of the arrow and before settings': ['no space before settings', 'no spaces at the arrow', 'tabs at the arrow', 'space before the times', 'form feeds', 'no-break space in the times', 'end time run on'],
      'does not end the text at an arrow without times': ['arrow without times', 'two lines of times'],
      'takes commas, any number of digits, and minutes and seconds over 59': ['bad times, then good', 'minutes over 59', 'seconds over 59', 'two digits of milliseconds', 'minutes of one digit'],
      'throws at what it cannot read': ['four digits of milliseconds', 'minus'],
      'loses a cue without text at the end of the file': ['no text at the end of the file'],
      'gives file order, not text track cue order': ['order of cues'],
    },
  },
]

describe.each(REFERENCES)('$name', ({ read, keepsIds, deviations }) => {
  const reasons = new Map(Object.entries(deviations).flatMap(([reason, files]) => files.map(file => [file, reason] as const)))

  it.each(Object.entries(VTT_CORPUS))('%s', async (file, text) => {
    const ours = oursInPlayerOrder(text, 'corpus.vtt').map(cue => keepsIds ? cue : { ...cue, id: '' })
    const theirs = await ask(read, text)
    const reason = reasons.get(file)
    if (reason) expect(theirs, `no longer true: ${reason}`).not.toEqual(ours)
    else expect(theirs).toEqual(ours)
  })

  it('has no deviation listed that is not in the corpus', () => {
    expect([...reasons.keys()].filter(file => !(file in VTT_CORPUS))).toEqual([])
  })
})
