import type { FactToken } from './tokens'

/** A number as spoken or written: its value, the token after it, and how it was put. */
export interface SpokenNumber {
  value: number
  from: number
  to: number
  /** A fraction of one alone ("three eighths"), a whole with a fraction ("one and a half"), or neither. */
  form: 'whole' | 'fraction' | 'mixed'
  /** True when it was "a" or "an" alone. */
  article: boolean
  /** The denominator of its fraction, 1 without. */
  parts: number
}

const SMALL: Record<string, number> = { zero: 0, one: 1, two: 2, three: 3, four: 4, five: 5, six: 6, seven: 7, eight: 8, nine: 9, ten: 10, eleven: 11, twelve: 12, thirteen: 13, fourteen: 14, fifteen: 15, sixteen: 16, seventeen: 17, eighteen: 18, nineteen: 19 }
const TENS: Record<string, number> = { twenty: 20, thirty: 30, forty: 40, fourty: 40, fifty: 50, sixty: 60, seventy: 70, eighty: 80, ninety: 90 }
const PARTS: Record<string, number> = { half: 2, halves: 2, halfs: 2, third: 3, thirds: 3, quarter: 4, quarters: 4, fourth: 4, fourths: 4, eighth: 8, eighths: 8, eights: 8, tenth: 10, tenths: 10, sixteenth: 16, sixteenths: 16, sixteens: 16 }
const GLYPHS: Record<string, [number, number]> = { '½': [1, 2], '¼': [1, 4], '¾': [3, 4], '⅛': [1, 8], '⅜': [3, 8], '⅝': [5, 8], '⅞': [7, 8], '⅓': [1, 3], '⅔': [2, 3], '⅕': [1, 5], '⅙': [1, 6], '⅚': [5, 6], '⅒': [1, 10] }

/** Reads the number that starts at a token, the longest there is; null when none does. */
export function readNumber(tokens: readonly FactToken[], from: number): SpokenNumber | null {
  const fraction = readFraction(tokens, from)
  const whole = readWhole(tokens, from)
  if (fraction && (!whole || fraction.to > whole.to || fraction.exact)) return { value: fraction.value, from, to: fraction.to, form: 'fraction', article: false, parts: fraction.parts }
  if (!whole) return null
  // "one point two"
  if (tokens[whole.to]?.text === 'point' && !whole.article) {
    let to = whole.to + 1
    let digits = ''
    for (; SMALL[tokens[to]?.text ?? ''] !== undefined && SMALL[tokens[to]!.text]! < 10; to++) digits += SMALL[tokens[to]!.text]
    if (!digits && /^\d+$/.test(tokens[to]?.text ?? '')) digits = tokens[to++]!.text
    if (digits) return { value: Number(`${whole.value}.${digits}`), from, to, form: 'whole', article: false, parts: 1 }
  }
  // "1 1⁄2", "2 and three eighths", "one and a half", "3-1/2"
  let next = whole.to
  const digits = tokens[from]!.number
  if (digits && tokens[next]?.text === '-' && tokens[next + 1]?.number) next++
  const joined = tokens[next]?.text === 'and' ? next + 1 : next
  if (!whole.article) {
    const rest = readFraction(tokens, joined)
    const spoken = joined > next
    if (rest && rest.value < 1 && (spoken || (digits && rest.written))) return { value: whole.value + rest.value, from, to: rest.to, form: 'mixed', article: false, parts: rest.parts }
  }
  return { ...whole, from, form: 'whole', parts: 1 }
}

/** "3⁄8", "½", "three eighths", "a sixteenth", "thirty seconds of", "half", "three quarter". */
export function readFraction(tokens: readonly FactToken[], from: number): { value: number, to: number, parts: number, written: boolean, exact: boolean } | null {
  const first = tokens[from]
  if (!first) return null
  const glyph = GLYPHS[first.text]
  if (glyph) return { value: glyph[0] / glyph[1], to: from + 1, parts: glyph[1], written: true, exact: true }
  if (first.number && /^[⁄/]$/.test(tokens[from + 1]?.text ?? '') && tokens[from + 2]?.number) {
    const parts = Number(tokens[from + 2]!.text)
    // 3/8 is a length; 1/250 or 24/7 is something else.
    if ([2, 3, 4, 5, 6, 8, 10, 12, 16, 32, 64].includes(parts)) return { value: Number(first.text) / parts, to: from + 3, parts, written: true, exact: true }
    return null
  }
  let at = from
  let over = 1
  if (first.text === 'a' || first.text === 'an' || first.text === 'one') at++
  else if (SMALL[first.text] !== undefined && SMALL[first.text]! > 1 && SMALL[first.text]! < 16) {
    over = SMALL[first.text]!
    at++
  }
  else if (first.number && /^(?:[1-9]|1[0-5])$/.test(first.text)) {
    over = Number(first.text)
    at++
  }
  if (at > from && tokens[at]?.text === '-') at++
  const part = tokens[at]?.text ?? ''
  const thirtySeconds = part === 'thirty' && /^-?$/.test(tokens[at + 1]?.text === '-' ? '-' : '') ? at + (tokens[at + 1]?.text === '-' ? 2 : 1) : -1
  if (thirtySeconds > 0 && /^seconds?$/.test(tokens[thirtySeconds]?.text ?? '') && (over > 1 || at > from) && over % 2 === 1) return { value: over / 32, to: thirtySeconds + 1, parts: 32, written: false, exact: true }
  const sixtyFourths = part === 'sixty' ? at + (tokens[at + 1]?.text === '-' ? 2 : 1) : -1
  if (sixtyFourths > 0 && /^fourths?$/.test(tokens[sixtyFourths]?.text ?? '')) return { value: over / 64, to: sixtyFourths + 1, parts: 64, written: false, exact: true }
  const parts = PARTS[part]
  if (!parts || over >= parts) return null
  // "Three eights" is a slip of the captions for eighths; "an eight" is not.
  if ((part === 'eights' || part === 'sixteens') && over < 3) return null
  return { value: over / parts, to: at + 1, parts, written: false, exact: at > from }
}

function readWhole(tokens: readonly FactToken[], from: number): { value: number, to: number, article: boolean } | null {
  const first = tokens[from]
  if (!first) return null
  if (first.number) return inDozens(tokens, { value: Number(first.text.replaceAll(',', '')), to: from + 1, article: false })
  if (first.text === 'a' || first.text === 'an') {
    if (/^hundred$/.test(tokens[from + 1]?.text ?? '')) return spelled(tokens, from + 1, 1)
    if (tokens[from + 1]?.text === 'dozen') return { value: 12, to: from + 2, article: false }
    return { value: 1, to: from + 1, article: true }
  }
  if (first.text === 'half' && tokens[from + 1]?.text === 'a' && tokens[from + 2]?.text === 'dozen') return { value: 6, to: from + 3, article: false }
  // "Hundred and fifty mil": the "a" is often swallowed.
  if (first.text === 'hundred') return spelled(tokens, from, 1)
  const number = spelled(tokens, from, 0)
  return number && inDozens(tokens, number)
}

/** "Two dozen" is 24. */
function inDozens(tokens: readonly FactToken[], number: { value: number, to: number, article: boolean }): { value: number, to: number, article: boolean } {
  return tokens[number.to]?.text === 'dozen' && Number.isInteger(number.value) ? { ...number, value: number.value * 12, to: number.to + 1 } : number
}

/** Spelled-out whole numbers to 9,999: "twenty five", "a hundred and ten", "eighteen hundred". */
function spelled(tokens: readonly FactToken[], from: number, held: number): { value: number, to: number, article: boolean } | null {
  let total = 0
  let group = held
  let at = from
  let any = held > 0
  let last: 'none' | 'small' | 'tens' | 'hundred' = 'none'
  for (; at < tokens.length; at++) {
    const word = tokens[at]!.text
    if (SMALL[word] !== undefined) {
      if (last === 'small' || (last === 'tens' && (SMALL[word]! > 9 || SMALL[word] === 0))) break
      group += SMALL[word]!
      last = 'small'
    }
    else if (TENS[word] !== undefined) {
      if (last === 'small' || last === 'tens') break
      group += TENS[word]!
      last = 'tens'
    }
    else if (word === 'hundred' && any && group > 0 && group < 100) {
      group *= 100
      last = 'hundred'
    }
    else if (word === 'thousand' && any && group > 0) {
      total += group * 1000
      group = 0
      last = 'hundred'
    }
    else if (word === '-' && last === 'tens' && SMALL[tokens[at + 1]?.text ?? ''] !== undefined) continue
    else if (word === 'and' && last === 'hundred' && (SMALL[tokens[at + 1]?.text ?? ''] !== undefined || TENS[tokens[at + 1]?.text ?? ''] !== undefined)) continue
    else break
    any = true
  }
  return any && at > from ? { value: total + group, to: at, article: false } : null
}
