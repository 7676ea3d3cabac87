import { describe, expect, it } from 'vitest'
import { read as readNamed, rows } from './support'

const read = (text: string, name = 'session.srt') => readNamed(text, name)
const ONE = '00:00:01,000 --> 00:00:02,000'
const TWO = '00:00:03,000 --> 00:00:04,000'
const both: [string, number, number, string][] = [['1', 1000, 2000, 'one'], ['2', 3000, 4000, 'two']]

describe('readCaptions on SubRip', () => {
  it('reads the plain form without a word', () => {
    const reading = read(`1\n${ONE}\none\n\n2\n${TWO}\ntwo\n`)
    expect(reading).toEqual({ cues: [{ id: '1', startMs: 1000, endMs: 2000, text: 'one' }, { id: '2', startMs: 3000, endMs: 4000, text: 'two' }], warnings: [], format: 'srt', encoding: 'utf-8' })
  })

  it.each([
    ['a byte order mark', `\uFEFF1\n${ONE}\none\n\n2\n${TWO}\ntwo`],
    ['CRLF', `1\r\n${ONE}\r\none\r\n\r\n2\r\n${TWO}\r\ntwo\r\n`],
    ['CR', `1\r${ONE}\rone\r\r2\r${TWO}\rtwo\r`],
    ['full stops', `1\n00:00:01.000 --> 00:00:02.000\none\n\n2\n00:00:03.000 --> 00:00:04.000\ntwo`],
    ['one-digit hours', `1\n0:00:01,000 --> 0:00:02,000\none\n\n2\n0:00:03,000 --> 0:00:04,000\ntwo`],
    ['one-digit minutes and seconds', `1\n0:0:1,000 --> 0:0:2,000\none\n\n2\n0:0:3,000 --> 0:0:4,000\ntwo`],
    ['no hours', `1\n00:01,000 --> 00:02,000\none\n\n2\n00:03,000 --> 00:04,000\ntwo`],
    ['no spaces at the arrow', `1\n00:00:01,000-->00:00:02,000\none\n\n2\n00:00:03,000-->00:00:04,000\ntwo`],
    ['spaces inside times', `1\n00: 00: 01, 000 --> 00: 00: 02, 000\none\n\n2\n${TWO}\ntwo`],
    ['extra blank lines between', `\n\n1\n${ONE}\none\n\n\n\n2\n${TWO}\ntwo\n\n\n`],
    ['lines of spaces between', `1\n${ONE}\none\n   \n2\n${TWO}\ntwo\n \t \n`],
    ['a blank line before the text', `1\n${ONE}\n\none\n\n2\n${TWO}\n\ntwo`],
    ['no blank line between', `1\n${ONE}\none\n2\n${TWO}\ntwo`],
    ['spaces round the numbers', ` 1 \n${ONE}\none\n\n\t2\n${TWO}\ntwo`],
    ['place codes after the times', `1\n${ONE}  X1:100 X2:200 Y1:5 Y2:9\none\n\n2\n${TWO}\ntwo`],
    ['position codes', `1\n${ONE}\n{\\an8}one\n\n2\n${TWO}\n{\\pos(10,20)}two`],
    ['looks', `1\n${ONE}\n<i>one</i>\n\n2\n${TWO}\n<font color="#ff0000" size=2><B>two</B></font>`],
  ])('takes %s in silence', (_name, file) => {
    const reading = read(file)
    expect(rows(reading.cues)).toEqual(both)
    expect(reading.warnings).toEqual([])
  })

  it('takes missing and repeated numbers', () => {
    expect(rows(read(`${ONE}\none\n\n${TWO}\ntwo`).cues)).toEqual([['', 1000, 2000, 'one'], ['', 3000, 4000, 'two']])
    expect(rows(read(`7\n${ONE}\none\n\n7\n${TWO}\ntwo`).cues)).toEqual([['7', 1000, 2000, 'one'], ['7', 3000, 4000, 'two']])
  })

  it('keeps a number that is text', () => {
    expect(rows(read(`5\n${ONE}\nhow many?\n42\n\n6\n${TWO}\n12`).cues)).toEqual([['5', 1000, 2000, 'how many?\n42'], ['6', 3000, 4000, '12']])
    expect(rows(read(`5\n${ONE}\nhow many?\n3\n${TWO}\ntwo`).cues)).toEqual([['5', 1000, 2000, 'how many?\n3'], ['', 3000, 4000, 'two']])
  })

  it('keeps several lines, and captions without text', () => {
    expect(rows(read(`1\n${ONE}\na\nb\nc\n\n2\n${TWO}\n\n`).cues)).toEqual([['1', 1000, 2000, 'a\nb\nc'], ['2', 3000, 4000, '']])
  })

  it('keeps text after a stray blank line with its caption and says so', () => {
    const reading = read(`1\n${ONE}\none\n\nmore\n\n2\n${TWO}\ntwo`)
    expect(rows(reading.cues)).toEqual([['1', 1000, 2000, 'one\nmore'], ['2', 3000, 4000, 'two']])
    expect(reading.warnings).toEqual(['Line 5: “more” stands after a blank line without times of its own; it was kept with the caption above.'])
  })

  it.each([
    ['00:00:xx,000 --> 00:00:02,000', /^Line 2: .* cannot be read, so this caption was left out/],
    ['00:00:01,000 --> soon', /^Line 2: .* cannot be read/],
    ['00:00:01 000 --> 00:00:02 000', /^Line 2: .* cannot be read/],
    ['-00:00:03,000 --> -00:00:02,000', /^Line 2: .* lie before the start of the clip/],
  ])('leaves out the caption at %j and says so', (times, warning) => {
    const reading = read(`1\n${times}\nlost\n\n2\n${TWO}\ntwo`)
    expect(rows(reading.cues)).toEqual([['2', 3000, 4000, 'two']])
    expect(reading.warnings).toHaveLength(1)
    expect(reading.warnings[0]).toMatch(warning)
  })

  it.each<[string, number, number, RegExp]>([
    ['-00:00:01,000 --> 00:00:02,000', 0, 2000, /now starts at 0/],
    ['00:00:01,5 --> 00:00:02,000', 1005, 2000, /three digits/],
    ['00:00:01,50 --> 00:00:02,000000', 1050, 2000, /three digits/],
    ['00:00:61,000 --> 00:01:02,000', 61_000, 62_000, /more than 59/],
    ['00:00:02,000 --> 00:00:01,000', 2000, 1000, /ends before it starts/],
    ['00:00:01,000 --> 00:00:01,000', 1000, 1000, /lasts no time/],
  ])('keeps the caption at %j with a warning', (times, startMs, endMs, warning) => {
    const reading = read(`1\n${times}\ntext`)
    expect(rows(reading.cues)).toEqual([['1', startMs, endMs, 'text']])
    expect(reading.warnings).toHaveLength(1)
    expect(reading.warnings[0]).toMatch(warning)
  })

  it('keeps arrows in text', () => {
    expect(rows(read(`1\n${ONE}\nturn --> here\nand --> there at 1:20\n\n2\n${TWO}\ntwo`).cues)[0]![3]).toBe('turn --> here\nand --> there at 1:20')
  })

  it('keeps comparisons and hearts, removes markup and script, and says so', () => {
    const reading = read(`1\n${ONE}\n5 < 6 > 4 <3 {brace}\n<script>alert("x")</script><a href='x'>go</a>`)
    expect(reading.cues[0]!.text).toBe('5 < 6 > 4 <3 {brace}\nalert("x")go')
    expect(reading.warnings).toEqual(['Line 3: “<script>” is not caption markup and was removed; the words around it were kept.'])
  })

  it('says what comes before the first times', () => {
    const reading = read(`Made by hand\n\n1\n${ONE}\none`)
    expect(rows(reading.cues)).toEqual([['1', 1000, 2000, 'one']])
    expect(reading.warnings).toEqual(['Line 1: “Made by hand” comes before the first times, so it was left out.'])
  })
})
