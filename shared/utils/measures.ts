import Fraction from 'fraction.js'

/**
 * Lengths as boatbuilders write them. Stored in millimetres beside the text as entered.
 *
 * Everything between text and millimetres is exact rational arithmetic: 1 in = 25.4 mm and
 * 1 ft = 12 in exactly (NIST SP 811, 2008 edition, B.8).
 */
export type BuildUnits = 'inch' | 'mm'
export type LengthUnit = 'mm' | 'cm' | 'm' | 'in' | 'ft'

export interface ParsedLength {
  /** Nearest double to the exact length in millimetres. */
  mm: number
  /** The exact length in millimetres as 'n/d' in lowest terms, or 'n'. */
  exactMm: string
  /** The unit written last, or the build's when none was written. */
  unit: LengthUnit
}

export type LengthReading = { ok: true, length: ParsedLength } | { ok: false, message: string }

const MM_PER: Record<LengthUnit, Fraction> = {
  mm: new Fraction(1),
  cm: new Fraction(10),
  m: new Fraction(1000),
  in: new Fraction(127, 5),
  ft: new Fraction(1524, 5),
}

/** No boat of one person's shop, nor anything in it, is longer: 1 km. */
export const MAX_LENGTH_MM = 1_000_000

const VULGAR: Record<string, string> = {
  '½': '1/2', '⅓': '1/3', '⅔': '2/3', '¼': '1/4', '¾': '3/4', '⅕': '1/5', '⅖': '2/5', '⅗': '3/5', '⅘': '4/5',
  '⅙': '1/6', '⅚': '5/6', '⅐': '1/7', '⅛': '1/8', '⅜': '3/8', '⅝': '5/8', '⅞': '7/8', '⅑': '1/9', '⅒': '1/10',
}

const NUMBER = String.raw`(?:(?<whole>\d+)(?:\s*-\s*|\s+)(?=\d+\s*/))?(?:(?<over>\d+)\s*/\s*(?<under>\d+)|(?<decimal>\d+(?:\.\d+)?|\.\d+))`
const UNIT = String.raw`(?<unit>millimet(?:re|er)s?|centimet(?:re|er)s?|met(?:re|er)s?|mm|cm|m|inch(?:es)?|in\.?|"|feet|foot|ft\.?|')?`
const TERM = new RegExp(String.raw`^\s*${NUMBER}\s*${UNIT}(?![\d./a-z])`)

/**
 * Reads a length: `1 1/2`, `1-1/2"`, `1 1⁄2 in`, `1½`, `38 mm`, `2' 3 1/4`, `6 ft`, `5.5"`, `38,5 mm`.
 * A number without a unit is inches or millimetres as the build is set; after feet it is inches.
 * Refused with a message: no number, a zero under the bar, two bars, a negative or absurd length.
 */
export function parseLength(text: string, units: BuildUnits): LengthReading {
  const refuse = (reason: string): LengthReading => ({ ok: false, message: `“${text.trim().slice(0, 40)}” ${reason}` })
  let rest = normalise(text)
  if (rest === '') return { ok: false, message: 'Write a length, such as 1 1/2 in or 38 mm.' }
  if (rest.length > 80) return refuse('is too long for a length.')
  if (/^\s*-/.test(rest)) return refuse('is negative. Lengths start at 0.')

  let total = new Fraction(0)
  let previous: LengthUnit | undefined
  while (rest.trim() !== '') {
    const term = TERM.exec(rest)
    if (!term) return refuse('is not a length. Write it as 1 1/2 in, 2\' 3 1/4" or 38 mm.')
    const groups = term.groups!
    const unit = unitOf(groups.unit) ?? (previous === 'ft' ? 'in' : units === 'inch' ? 'in' : 'mm')
    if (previous && !(previous === 'ft' && unit === 'in')) return refuse('has more than one length in it. Only feet and inches go together.')
    if (groups.under !== undefined && /^0+$/.test(groups.under)) return refuse('has a zero under the bar.')
    total = total.add(valueOf(groups).mul(MM_PER[unit]))
    previous = unit
    // A dash may join feet and inches: 2'-3 1/4".
    rest = rest.slice(term[0].length).replace(/^\s*-\s*(?=\d)/, ' ')
  }
  if (total.compare(MAX_LENGTH_MM) > 0) return refuse('is over a kilometre. Check the unit.')
  return { ok: true, length: { mm: total.valueOf(), exactMm: total.toFraction(), unit: previous! } }
}

function valueOf(groups: Record<string, string | undefined>): Fraction {
  if (groups.decimal !== undefined) return new Fraction(groups.decimal.startsWith('.') ? `0${groups.decimal}` : groups.decimal)
  return new Fraction(`${groups.over}/${groups.under}`).add(groups.whole ?? 0)
}

function normalise(text: string): string {
  return text
    .toLowerCase()
    .replace(/[½⅓⅔¼¾⅕⅖⅗⅘⅙⅚⅐⅛⅜⅝⅞⅑⅒]/g, sign => ` ${VULGAR[sign]}`)
    .replace(/[\u2044\u2215]/g, '/')
    .replace(/[\u2032\u2018\u2019]/g, '\'')
    .replace(/[\u2033\u201C\u201D]|''/g, '"')
    .replace(/[\u2010-\u2015\u2212]/g, '-')
    .replace(/(\d),(\d)/g, '$1.$2') // a decimal comma; nobody writes thousands of inches
    .replace(/\s+/g, ' ')
    .trim()
}

function unitOf(written: string | undefined): LengthUnit | undefined {
  if (!written) return undefined
  if (written === '"' || written.startsWith('in')) return 'in'
  if (written === '\'' || written.startsWith('f')) return 'ft'
  if (written === 'mm' || written.startsWith('mi')) return 'mm'
  return written.startsWith('c') ? 'cm' : 'm'
}

export interface FormattedLength {
  text: string
  /** What is written minus what is stored, in millimetres: above zero where the text rounds up. */
  errorMm: number
}

/**
 * Writes a stored length in the build's units: inches to the nearest 1/64 (or `denominator`), reduced,
 * with real fractions ('1½ in', '2 13⁄64 in'); or millimetres to one decimal ('38.1 mm'). Halves round up.
 * @param mm length in millimetres
 */
export function formatLength(mm: number, units: BuildUnits, options: { denominator?: number } = {}): FormattedLength {
  const exact = new Fraction(mm)
  if (units === 'mm') {
    const shown = exact.mul(10).round().div(10)
    return { text: `${shown.toString()} mm`, errorMm: shown.sub(exact).valueOf() }
  }
  const step = options.denominator ?? 64
  const inches = exact.div(MM_PER.in).mul(step).round().div(step)
  return { text: `${formatFraction(inches.toFraction())} in`, errorMm: inches.mul(MM_PER.in).sub(exact).valueOf() }
}

const VULGAR_FOR = new Map(Object.entries(VULGAR).map(([sign, fraction]) => [fraction, sign]))

/**
 * A fraction such as '3/2' or '131/64' as it is set in type: '1½', '2 3⁄64'. Uses the single characters
 * of Unicode where they exist, otherwise the fraction slash (U+2044) after a space.
 */
export function formatFraction(fraction: string): string {
  const value = new Fraction(fraction)
  const sign = value.s < 0n ? '\u2212' : ''
  const whole = value.n / value.d
  const rest = value.n % value.d
  if (rest === 0n) return `${sign}${whole}`
  const single = VULGAR_FOR.get(`${rest}/${value.d}`)
  const lead = whole === 0n ? '' : String(whole)
  return single ? `${sign}${lead}${single}` : `${sign}${lead}${lead && ' '}${rest}\u2044${value.d}`
}
