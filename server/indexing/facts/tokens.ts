/** A word, number or mark of speech, small letters, with its place in the joined text (UTF-16 offsets). */
export interface FactToken { text: string, start: number, end: number, number: boolean }

/** `.5` counts as a number unless it ends a sentence without a space; the tick of `3'6"` as a sign only behind a figure. */
const TOKEN = /\d+(?:,\d{3})*(?:\.\d+)?|(?<![\p{L}\d.])\.\d+|(?<=\d)['’](?!\p{L})|[¼-¾⅐-⅞]|\p{L}+(?:['’]\p{L}+)*|[⁄/#:.,;!?%£$€°"”″′–-]/gu

export function factTokens(text: string): FactToken[] {
  return [...text.matchAll(TOKEN)].map(match => ({ text: match[0].toLowerCase().replace('’', '\''), start: match.index, end: match.index + match[0].length, number: /^\.?\d/.test(match[0]) }))
}
