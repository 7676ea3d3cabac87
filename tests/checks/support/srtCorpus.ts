const ONE = '00:00:01,000 --> 00:00:02,000'
const TWO = '00:00:03,000 --> 00:00:04,000'

/** SubRip files of our own. */
export const SRT_CORPUS: Record<string, string> = {
  'plain': `1\n${ONE}\none\n\n2\n${TWO}\ntwo\n`,
  'several lines': `1\n${ONE}\none\nmore\nand more\n\n2\n${TWO}\ntwo\n`,
  'CRLF': `1\r\n${ONE}\r\none\r\nmore\r\n\r\n2\r\n${TWO}\r\ntwo\r\n`,
  'byte order mark': `\uFEFF1\n${ONE}\none\n\n2\n${TWO}\ntwo\n`,
  'no line end at the end': `1\n${ONE}\none\n\n2\n${TWO}\ntwo`,
  'full stops': '1\n00:00:01.000 --> 00:00:02.000\none\n',
  'one-digit hours': '1\n0:00:01,000 --> 0:00:02,000\none\n',
  'long hours': '1\n123:00:01,000 --> 123:00:02,000\none\n',
  'numbers that skip and repeat': `7\n${ONE}\none\n\n7\n${TWO}\ntwo\n`,
  'no numbers': `${ONE}\none\n\n${TWO}\ntwo\n`,
  'extra blank lines': `\n\n1\n${ONE}\none\n\n\n\n2\n${TWO}\ntwo\n\n\n`,
  'no text': `1\n${ONE}\n\n2\n${TWO}\ntwo\n`,
  'a number as text': `1\n${ONE}\nhow many?\n42\n\n2\n${TWO}\ntwo\n`,
  'overlap': '1\n00:00:01,000 --> 00:00:05,000\none\n\n2\n00:00:02,000 --> 00:00:03,000\ntwo\n',
  'out of order': `1\n${TWO}\ntwo\n\n2\n${ONE}\none\n`,
  'few digits of milliseconds': '1\n00:00:01,5 --> 00:00:02,50\none\n',
  'letters of other scripts': `1\n${ONE}\n船 – лодка – żagiel\n`,
  'place codes': `1\n${ONE} X1:100 X2:200 Y1:10 Y2:20\none\n`,
  'looks': `1\n${ONE}\n<i>one</i> <font color="#ff0000">two</font>\n`,
  'position': `1\n${ONE}\n{\\an8}one\n`,
  'blank line inside': `1\n${ONE}\none\n\nmore\n\n2\n${TWO}\ntwo\n`,
  'bad times': `1\n00:00:xx,000 --> 00:00:02,000\nlost\n\n2\n${TWO}\ntwo\n`,
}
