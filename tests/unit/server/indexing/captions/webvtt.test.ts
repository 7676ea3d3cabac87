import { describe, expect, it } from 'vitest'
import { DomainError } from '#shared/utils/errors'
import { read, rows } from './support'

// Each case follows a step of "WebVTT: The Web Video Text Tracks Format" (W3C), section 6, Parsing.

const ONE = '00:00.000 --> 00:01.000'
const ROW = (text: string, id = ''): [string, number, number, string] => [id, 0, 1000, text]
const texts = (file: string) => rows(read(file).cues)

describe('signature', () => {
  it.each([
    ['alone', 'WEBVTT'],
    ['with a line end', 'WEBVTT\n'],
    ['with a space', 'WEBVTT '],
    ['with a tab', 'WEBVTT\t'],
    ['with words after a space', 'WEBVTT captions of the shop'],
    ['with words after a tab', 'WEBVTT\tcaptions'],
    ['with a space and a line end', 'WEBVTT \n'],
    ['with a carriage return', 'WEBVTT\r'],
    ['after a byte order mark', '\uFEFFWEBVTT'],
    ['with blank lines only', 'WEBVTT\n\n\n\n'],
  ])('%s is accepted without any cue', (_name, file) => {
    const reading = read(file)
    expect(reading.cues).toEqual([])
    expect(reading.format).toBe('vtt')
    expect(reading.warnings).toEqual(['The file is WebVTT but holds no caption that can be read.'])
  })

  it.each([
    ['cut short', 'WEBVT'],
    ['in small letters', 'webvtt'],
    ['run on', 'WEBVTTX'],
    ['with a colon', 'WEBVTT:'],
    ['with a form feed', 'WEBVTT\f'],
    ['with a NUL', 'WEBVTT\0'],
    ['with a no-break space', 'WEBVTT\u00A0'],
    ['with a dash run on', 'WEBVTT-->'],
    ['after a space', ' WEBVTT'],
    ['after a line end', '\nWEBVTT'],
    ['after two byte order marks', '\uFEFF\uFEFFWEBVTT'],
    ['absent, times first', ''],
    ['of something else', 'CAPTIONS'],
  ])('%s is refused', (_name, signature) => {
    const file = signature === '' ? `${ONE}\ntext` : `${signature}\n\n${ONE}\ntext`
    expect(() => read(file)).toThrowError(DomainError)
    expect(() => read(file)).toThrowError(/starts with “WEBVTT”/)
  })

  it('is read after one byte order mark', () => {
    expect(texts(`\uFEFFWEBVTT\n\n${ONE}\ntext`)).toEqual([ROW('text')])
  })
})

describe('line ends', () => {
  it.each([['LF', '\n'], ['CR', '\r'], ['CRLF', '\r\n']])('%s', (_name, end) => {
    const file = ['WEBVTT', '', 'a', ONE, 'one', 'two', '', 'b', ONE, 'three', ''].join(end)
    expect(texts(file)).toEqual([ROW('one\ntwo', 'a'), ROW('three', 'b')])
  })

  it('mixed: CR LF is one end, LF CR is two', () => {
    expect(texts(`WEBVTT\r\n\n${ONE}\rone\n\r${ONE}\r\ntwo\r\r\n`)).toEqual([ROW('one'), ROW('two')])
  })

  it('does not break lines at form feeds, vertical tabs or Unicode separators', () => {
    expect(texts(`WEBVTT\n\n${ONE}\na\fb\vc\u0085d\u2028e\u2029f`)).toEqual([ROW('a\fb\vc\u0085d\u2028e\u2029f')])
  })

  it('takes any number of blank lines between blocks', () => {
    expect(texts(`WEBVTT\n\n\n\n${ONE}\none\n\n\n\n${ONE}\ntwo\n\n\n`)).toEqual([ROW('one'), ROW('two')])
  })

  it('treats a line of spaces as text, not as blank', () => {
    expect(texts(`WEBVTT\n\n${ONE}\none\n \ntwo`)).toEqual([ROW('one\n \ntwo')])
  })
})

describe('NUL', () => {
  it('becomes U+FFFD in text and ids', () => {
    expect(texts(`WEBVTT\n\ni\0d\n${ONE}\nte\0xt\0`)).toEqual([ROW('te\uFFFDxt\uFFFD', 'i\uFFFDd')])
  })

  it('spoils the times it stands in', () => {
    expect(texts(`WEBVTT\n\n00:00\0.000 --> 00:01.000\nlost\n\n${ONE}\nkept`)).toEqual([ROW('kept')])
  })

  it('is allowed in the header and among the settings', () => {
    expect(texts(`WEBVTT \0\n\0\n\n${ONE} \0\nkept`)).toEqual([ROW('kept')])
  })
})

describe('header', () => {
  it('passes over lines until a blank one', () => {
    expect(texts(`WEBVTT\nKind: captions\nLanguage: en\n\n${ONE}\ntext`)).toEqual([ROW('text')])
  })

  it('ends at a line with an arrow, which is read as a cue', () => {
    expect(texts(`WEBVTT\n${ONE}\ntext`)).toEqual([ROW('text')])
    expect(texts(`WEBVTT\nKind: captions\n${ONE}\ntext`)).toEqual([ROW('text')])
  })

  it('does not take its last line as an id', () => {
    expect(texts(`WEBVTT\nid\n${ONE}\ntext`)).toEqual([ROW('text', '')])
  })

  it('with an arrow but no times loses only that block', () => {
    expect(texts(`WEBVTT\nfoo --> bar\nlost\n\n${ONE}\ntext`)).toEqual([ROW('text')])
  })

  it('on the signature line may hold an arrow', () => {
    expect(texts(`WEBVTT ${ONE}\n\n${ONE}\ntext`)).toEqual([ROW('text')])
  })

  it('holds regions of the old kind without effect', () => {
    expect(texts(`WEBVTT\nRegion: id=foo width=40%\n\n${ONE} region:foo\ntext`)).toEqual([ROW('text')])
  })
})

describe('blocks without cues', () => {
  it('are NOTE, STYLE and REGION, in silence', () => {
    const reading = read(`WEBVTT\n\nNOTE\na comment\n\nNOTE one line\n\nSTYLE\n::cue { color: red }\n\nREGION\nid:foo\n\n${ONE} region:foo\ntext`)
    expect(rows(reading.cues)).toEqual([ROW('text')])
    expect(reading.warnings).toEqual([])
  })

  it('are other stretches of text, with a warning that names the line', () => {
    const reading = read(`WEBVTT\n\nforgotten\nwords\n\n${ONE}\ntext`)
    expect(rows(reading.cues)).toEqual([ROW('text')])
    expect(reading.warnings).toEqual(['Line 3: “forgotten” has no times, so it was left out.'])
  })

  it('end where an arrow comes on the third line or later', () => {
    expect(texts(`WEBVTT\n\nNOTE\nnot an id\n${ONE}\ntext`)).toEqual([ROW('text')])
    expect(texts(`WEBVTT\n\nSTYLE\n::cue {\n${ONE}\ntext`)).toEqual([ROW('text')])
  })

  it('are ids when the arrow is on the second line', () => {
    expect(texts(`WEBVTT\n\nNOTE\n${ONE}\na\n\nSTYLE\n${ONE}\nb\n\nREGION\n${ONE}\nc`))
      .toEqual([ROW('a', 'NOTE'), ROW('b', 'STYLE'), ROW('c', 'REGION')])
  })

  it('may come after cues', () => {
    expect(texts(`WEBVTT\n\n${ONE}\na\n\nSTYLE\n::cue(b) {}\n\nREGION\nid:x\n\n${ONE}\nb`)).toEqual([ROW('a'), ROW('b')])
  })
})

describe('ids', () => {
  it.each(['1', 'intro', ' spaces kept ', '-- >', '->', '--', '>', '\t', 'WEBVTT', '&amp;', '<b>', 'a:b.c'])('%j is kept as written', (id) => {
    expect(texts(`WEBVTT\n\n${id}\n${ONE}\ntext`)).toEqual([ROW('text', id)])
  })

  it('is empty without a line of its own', () => {
    expect(texts(`WEBVTT\n\n${ONE}\ntext`)).toEqual([ROW('text', '')])
  })

  it('may repeat', () => {
    expect(texts(`WEBVTT\n\nx\n${ONE}\na\n\nx\n${ONE}\nb`)).toEqual([ROW('a', 'x'), ROW('b', 'x')])
  })

  it('separated by a blank line belongs to nothing', () => {
    expect(texts(`WEBVTT\n\nlost\n\n${ONE}\ntext`)).toEqual([ROW('text', '')])
  })

  it('of two lines leaves the cue without one', () => {
    expect(texts(`WEBVTT\n\none\ntwo\n${ONE}\ntext`)).toEqual([ROW('text', '')])
  })

  it('with an arrow is taken for times, and the next line of times starts a cue', () => {
    expect(texts(`WEBVTT\n\nan --> id\n${ONE}\ntext`)).toEqual([ROW('text', '')])
  })

  it('right after a cue becomes its text, with a warning', () => {
    const reading = read(`WEBVTT\n\n1\n${ONE}\none\n2\n${ONE}\ntwo`)
    expect(rows(reading.cues)).toEqual([ROW('one\n2', '1'), ROW('two', '')])
    expect(reading.warnings[0]).toMatch(/^Line 7: no blank line/)
  })
})

describe('arrows', () => {
  it('end the text of a cue and begin the next', () => {
    expect(texts(`WEBVTT\n\n${ONE}\none\n${ONE}\ntwo`)).toEqual([ROW('one'), ROW('two')])
    expect(texts(`WEBVTT\n\n${ONE}\n${ONE}\ntwo`)).toEqual([ROW(''), ROW('two')])
  })

  it('without times end the text and lose what follows up to a blank line', () => {
    expect(texts(`WEBVTT\n\n${ONE}\none\n-->\nlost\n\n${ONE}\ntwo`)).toEqual([ROW('one'), ROW('two')])
    expect(texts(`WEBVTT\n\n-->\n${ONE}\ntext`)).toEqual([ROW('text')])
    expect(texts(`WEBVTT\n\n-->\n-->\n-->\n${ONE}\ntext`)).toEqual([ROW('text')])
  })

  it('after an id and bad times belong to the same block', () => {
    expect(texts(`WEBVTT\n\nid\n00:00.000 --> never\nlost\n${ONE}\ntext`)).toEqual([ROW('text', '')])
  })

  it('written as a reference are text', () => {
    expect(texts(`WEBVTT\n\n${ONE}\na --&gt; b`)).toEqual([ROW('a --> b')])
  })

  it('need two dashes and no gap', () => {
    expect(texts('WEBVTT\n\n00:00.000 -> 00:01.000\nlost')).toEqual([])
    expect(texts('WEBVTT\n\n00:00.000 -- > 00:01.000\nlost')).toEqual([])
    expect(texts('WEBVTT\n\n00:00.000 ---> 00:01.000\nlost')).toEqual([])
    expect(texts('WEBVTT\n\n00:00.000 —> 00:01.000\nlost')).toEqual([])
  })
})

describe('times', () => {
  it.each<[string, number, number]>([
    ['00:00.000 --> 00:00.001', 0, 1],
    ['00:00:00.000 --> 00:00:00.999', 0, 999],
    ['01:02.003 --> 01:02:03.004', 62_003, 3_723_004],
    ['59:59.999 --> 60:00:00.000', 3_599_999, 216_000_000],
    ['99:59:59.999 --> 100:00:00.000', 359_999_999, 360_000_000],
    ['0:00:00.000 --> 1:00:00.000', 0, 3_600_000],
    ['000:00:01.000 --> 0000001:00:00.000', 1000, 3_600_000],
    ['00:00.000-->00:01.000', 0, 1000],
    ['00:00.000\t-->\t00:01.000', 0, 1000],
    ['00:00.000\f-->\f00:01.000', 0, 1000],
    ['   00:00.000   -->   00:01.000   ', 0, 1000],
    ['\t \f00:00.000 --> 00:01.000', 0, 1000],
    // The algorithm looks for no more after the end time: what follows is settings, however odd.
    ['00:00.000 --> 00:01.000x', 0, 1000],
    ['00:00.000 --> 00:01.000align:start', 0, 1000],
    ['00:00.000 --> 00:01.000 --> 00:02.000', 0, 1000],
    ['00:00.000 --> 00:01.000 nonsense :: line:', 0, 1000],
    ['00:00.000 --> 00:01.000 line:0 position:50% size:20% align:start vertical:rl', 0, 1000],
    // No step refuses an end that is not after the start.
    ['00:02.000 --> 00:01.000', 2000, 1000],
    ['00:01.000 --> 00:01.000', 1000, 1000],
  ])('%j is read', (line, startMs, endMs) => {
    expect(rows(read(`WEBVTT\n\n${line}\ntext`).cues)).toEqual([['', startMs, endMs, 'text']])
  })

  it.each([
    '-00:00.000 --> 00:01.000',
    '00:-1.000 --> 00:01.000',
    '00:00.-00 --> 00:01.000',
    '00:00.000 --> -00:01.000',
    '00:00,000 --> 00:01,000',
    '00:00.000 --> 00:01,000',
    '00:00:000 --> 00:01.000',
    '00:00 --> 00:01',
    '00:00. --> 00:01.000',
    '00:00.0 --> 00:01.000',
    '00:00.00 --> 00:01.000',
    '00:00.0000 --> 00:01.000',
    '00:00.000 --> 00:01.0000',
    '00:00.000 --> 00:01.00',
    '0:00.000 --> 00:01.000',
    '000:00.000 --> 00:01.000',
    '00:0.000 --> 00:01.000',
    '00:000.000 --> 00:01.000',
    '00:00:0.000 --> 00:01.000',
    '00:0:00.000 --> 00:01.000',
    '00:000:00.000 --> 00:01.000',
    '00:00:000.000 --> 00:01.000',
    ':00:00.000 --> 00:01.000',
    '00:00:00:00.000 --> 00:01.000',
    '00.000 --> 00:01.000',
    '.000 --> 00:01.000',
    '00:60.000 --> 01:01.000',
    '00:60:00.000 --> 01:01:00.000',
    '00:00:60.000 --> 00:01:01.000',
    '00:00.000 --> 00:60.000',
    '60:00.000 --> 61:00.000',
    '00 :00.000 --> 00:01.000',
    '00: 00.000 --> 00:01.000',
    '00:00 .000 --> 00:01.000',
    '00:00. 000 --> 00:01.000',
    'x00:00.000 --> 00:01.000',
    '00:00.000x --> 00:01.000',
    '00:00.000 x --> 00:01.000',
    '00:00.000 --> x00:01.000',
    '00:00.000\u00A0--> 00:01.000',
    '00:00.000\v--> 00:01.000',
    '٠٠:٠٠.٠٠٠ --> 00:01.000',
    '00:00.000 -->',
    '--> 00:01.000',
    '-->',
  ])('%j is refused with a warning, and the next cue is read', (line) => {
    const reading = read(`WEBVTT\n\nid\n${line}\nlost\n\n00:05.000 --> 00:06.000\nkept`)
    expect(rows(reading.cues)).toEqual([['', 5000, 6000, 'kept']])
    expect(reading.warnings[0]).toMatch(/^Line 4: the times “.*” cannot be read/s)
  })

  it('without text, at the end of the file', () => {
    expect(texts(`WEBVTT\n\n${ONE}`)).toEqual([ROW('')])
    expect(texts(`WEBVTT\n\n${ONE}\n`)).toEqual([ROW('')])
    expect(texts(`WEBVTT\n\nid\n${ONE}`)).toEqual([ROW('', 'id')])
    expect(texts(`WEBVTT\n\n${ONE}\n\nnot text`)).toEqual([ROW('')])
  })

  it('of absurd length stay numbers', () => {
    const [cue] = read(`WEBVTT\n\n00:00.000 --> ${'9'.repeat(400)}:00:00.000\ntext`).cues
    expect(cue!.endMs).toBe(Number.MAX_SAFE_INTEGER)
  })

  it('keep the order of the file', () => {
    const cues = read('WEBVTT\n\n00:05.000 --> 00:06.000\nlater\n\n00:01.000 --> 00:02.000\nsooner').cues
    expect(cues.map(cue => cue.text)).toEqual(['later', 'sooner'])
  })
})

describe('text', () => {
  const shown = (text: string) => read(`WEBVTT\n\n${ONE}\n${text}`).cues[0]!.text

  it.each<[string, string]>([
    // Tags
    ['<b>bold</b> <i>slanted</i> <u>lined</u>', 'bold slanted lined'],
    ['<c.yellow.bg_blue>coloured</c>', 'coloured'],
    ['<v Nell>Hand me the plane', 'Hand me the plane'],
    ['<v.loud.first Nell of the shop>Hand me the plane</v>', 'Hand me the plane'],
    ['<lang en-GB>timber</lang>', 'timber'],
    ['<ruby>plank<rt>board</rt></ruby>', 'plankboard'],
    ['<rt>outside ruby</rt>', 'outside ruby'],
    ['one <00:00:00.500>two <00:00.700>three', 'one two three'],
    ['<00:99>kept words', 'kept words'],
    ['<script>alert(1)</script>', 'alert(1)'],
    ['<img src=x onerror=alert(1)>words', 'words'],
    ['<>empty</>', 'empty'],
    ['< b>spaced', 'spaced'],
    ['<b', ''],
    ['before <b', 'before '],
    ['a < b and c > d', 'a  d'],
    ['a > b', 'a > b'],
    ['<<b>>twice', '>twice'],
    ['<b\nclass>over lines', 'over lines'],
    ['</b>unopened', 'unopened'],
    ['<b>unclosed', 'unclosed'],
    ['<b><i>crossed</b></i>', 'crossed'],
    ['<v a &gt; b>named', 'named'],
    ['<v a &amp>named', 'named'],
    // Character references, as HTML decodes them in text
    ['&amp;&lt;&gt;', '&<>'],
    ['&lrm;&rlm;&nbsp;', '\u200E\u200F\u00A0'],
    ['&amp &lt &gt', '& < >'],
    ['&ampx', '&x'],
    ['&notit;', '¬it;'],
    ['&notin;', '∉'],
    ['&NotEqualTilde;', '\u2242\u0338'],
    ['&frac12; &times; &deg;', '½ × °'],
    ['&#65;&#x42;&#X43;', 'ABC'],
    ['&#65 &#x42', 'A B'],
    ['&#0;&#xD800;&#x110000;', '\uFFFD\uFFFD\uFFFD'],
    ['&#128;', '€'],
    ['&#; &#x; &; & &bogus; &hello', '&#; &#x; &; & &bogus; &hello'],
    ['&AMP;&Amp;', '&&Amp;'],
    ['&amp;lt;', '&lt;'],
    ['&am<b>p;</b>', '&amp;'],
    ['&lt;b&gt;', '<b>'],
    ['&apos;&quot;', '\'"'],
    // Space
    ['  both ends  ', '  both ends  '],
    ['one\ntwo\n\tthree', 'one\ntwo\n\tthree'],
    ['WEBVTT', 'WEBVTT'],
    ['NOTE not a note', 'NOTE not a note'],
    ['Łódź – 船 🛶', 'Łódź – 船 🛶'],
  ])('%j shows as %j', (text, expected) => {
    expect(shown(text)).toBe(expected)
  })

  it('says when it removes what is no caption markup', () => {
    const reading = read(`WEBVTT\n\n${ONE}\n<script src="x">alert(1)</script>`)
    expect(reading.warnings).toEqual(['Line 4: “<script src="x">” is not caption markup and was removed; the words around it were kept.'])
  })

  it('is unmarked in silence for tags that players know', () => {
    expect(read(`WEBVTT\n\n${ONE}\n<v.a Nell><c.b>x</c> <lang en>y</lang> <ruby>z<rt>w</rt></ruby></v>`).warnings).toEqual([])
  })
})
