import type { SpokenClip } from '../pencil/types'
import { joinCues } from './joinCues'
import { readNumber, type SpokenNumber } from './numbers'
import { hearSpeaker, type Speaker } from './speaker'
import { type FactToken, factTokens } from './tokens'
import type { FactKind, FactUnit, SpokenFact } from './types'

/** Millimetres in one inch, exactly (NIST SP 811). */
const INCH = 25.4
const UNITS: Record<string, { mm?: number, min?: number, imperial?: boolean }> = {
  'inch': { mm: INCH, imperial: true }, 'inches': { mm: INCH, imperial: true }, '"': { mm: INCH, imperial: true }, '″': { mm: INCH, imperial: true }, '”': { mm: INCH, imperial: true },
  'foot': { mm: 12 * INCH, imperial: true }, 'feet': { mm: 12 * INCH, imperial: true }, 'ft': { mm: 12 * INCH, imperial: true }, '′': { mm: 12 * INCH, imperial: true }, '\'': { mm: 12 * INCH, imperial: true },
  'yard': { mm: 36 * INCH, imperial: true }, 'yards': { mm: 36 * INCH, imperial: true }, 'thou': { mm: INCH / 1000, imperial: true }, 'thousandth': { mm: INCH / 1000, imperial: true }, 'thousandths': { mm: INCH / 1000, imperial: true },
  'mm': { mm: 1 }, 'mil': { mm: 1 }, 'mils': { mm: 1 }, 'mill': { mm: 1 }, 'mills': { mm: 1 }, 'millimeter': { mm: 1 }, 'millimeters': { mm: 1 }, 'millimetre': { mm: 1 }, 'millimetres': { mm: 1 },
  'cm': { mm: 10 }, 'centimeter': { mm: 10 }, 'centimeters': { mm: 10 }, 'centimetre': { mm: 10 }, 'centimetres': { mm: 10 },
  'm': { mm: 1000 }, 'meter': { mm: 1000 }, 'meters': { mm: 1000 }, 'metre': { mm: 1000 }, 'metres': { mm: 1000 },
  'second': { min: 1 / 60 }, 'seconds': { min: 1 / 60 }, 'minute': { min: 1 }, 'minutes': { min: 1 }, 'mins': { min: 1 }, 'min': { min: 1 }, 'hour': { min: 60 }, 'hours': { min: 60 }, 'day': { min: 1440 }, 'days': { min: 1440 },
}

/** What is numbered rather than counted or measured. */
const NUMBERED = /^(?:frame|frames|bulkhead|bulkheads|rib|ribs|station|stations|mold|mould|moulds|molds|form|forms|strake|plank|step|page|sheet|drawing|chapter|episode|part|video|version|day|boat|size|grade|route|channel|week)$/
const NOT_MEASURED = /^(?:grit|percent|%|£|\$|€|pounds?|quid|dollars?|bucks?|euros?|pence|cents?|ounces?|oz|grams?|gsm|kilos?|kg|lbs?|psi|bar|volts?|amps?|watts?|knots?|miles?|mph|years?|weeks?|months?|o'clock|am|pm|people|times|litres?|liters?|ml|gallons?|horsepower|hp)$/
const COUNTED = /^(?:holes?|strips?|wires?|stitches|screws?|nails?|rivets?|roves?|clamps|cramps|layers|coats|ribs|timbers|frames|planks|strakes|staples|bolts|wraps|pumps|laminations|laminates|plies|veneers|molds|moulds|forms|pegs|lashings|pieces|blocks|knees|beams|turns|lengths|battens|panels|sheets|boards|plugs|bungs|dowels|washers|strokes|passes|loops|ties|segments|staves|spacers|slots|scuppers|stations|points|marks|cleats|cells|batteries|wedges|floors|stringers|laps|fastenings|fasteners|tacks|crimps|terminals|fuses|circuits|slats|posts|stanchions|shrouds|stations|bags|cups|squirts|batches|threads|strands|tenons|mortises|mortices|gussets|weights|bricks|legs|hands|rows|sections|rings|eyes|hooks|buttons)$/
const DIMENSION = /^(?:wide|thick|long|deep|high|tall|across|apart|diameter|radius|square|spacing|spacings|centers|centres|overlap|overhang|proud|oversize|oversized|short|in|up|down|from|back|out|off|above|below|past|over|overall|rocker|rise|crown|camber|drop|finished)$/
const MATERIAL = /^(?:ply|plywood|stock|spruce|oak|ash|cedar|fir|pine|larch|mahogany|walnut|teak|maple|timber|lumber|board|boards|sheet|sheets|okoume|meranti|thick|thickness|strip|planking|material|marine|acrylic|polycarbonate|plate|poplar|elm|birch|planks|staff)$/
const FASTENER = /^(?:screws?|nails?|staples?|bolts?|rivets?|rings?|brads?|roves?|tacks|pins)$/
const VAGUE_BEFORE = /^(?:couple|few|several|some|many)$/
const HEAT = /\b(?:in here|in the (?:shed|shop|garage|barn|workshop|tent|room)|outside|warm|cold|cool|hot|heater|heat|temperature|thermometer|fahrenheit|celsius|centigrade|today|this morning|overnight|above|below freezing|the glue|epoxy|resin|hardener|cure|curing|kettle|steam|oven|weather|it's only|got up to|room|air|roof|pot life|minutes|tonight|sunny|cook|cooks|boil|warmed|warmed up|stove|fire|radiator|sun)\b/
const ANGLE_WORDS = /\b(?:bevel|angle|rake|flare|slope|plane|cut|set|tilt|gauge|square|miter|mitre|saw|blade|edge|corner|camber|lean|leans|twist|bend|off|lean it|stick|upright|vertical|table)\b/

interface Heard { tokens: FactToken[], text: string, lower: string, startMsAt: (offset: number) => number, speaker: Speaker, inches: boolean }

/**
 * Every length, thickness, angle, slope and mixing ratio, count, screw gauge, waiting time and temperature that is
 * stated over one clip, with its value in millimetres, degrees, minutes or °C (see `FactUnit`). Vague numbers ("a
 * mil or two", "six or seven strokes"), grit, clock times, money and numbers that are names ("frame two") are left.
 * Glues are heard by `hearAdhesives`, which has to know what is being done.
 *
 * Inches are 25.4 mm exactly (NIST SP 811); a wire gauge is its diameter by the AWG formula (ASTM B258).
 */
export function hearFacts(clip: SpokenClip, options: { units?: 'inch' | 'mm' | null, speaker?: Speaker } = {}): SpokenFact[] {
  const heard = join(clip, options)
  const { tokens } = heard
  const facts: SpokenFact[] = []
  for (let at = 0; at < tokens.length;) {
    const found = readFact(heard, at)
    if (!found) {
      at++
      continue
    }
    if (found.fact) facts.push(found.fact)
    if (found.second) facts.push(found.second)
    at = Math.max(at + 1, found.to)
  }
  return facts
}

function join(clip: SpokenClip, options: { units?: 'inch' | 'mm' | null, speaker?: Speaker }): Heard {
  const { text, startMsAt } = joinCues(clip)
  const speaker = options.speaker ?? hearSpeaker(text, options.units ?? null)
  return { tokens: factTokens(text), text, lower: text.toLowerCase(), startMsAt, speaker, inches: speaker.inches }
}

interface Found { fact?: SpokenFact, second?: SpokenFact, to: number }

function readFact(heard: Heard, at: number): Found | null {
  return readGauge(heard, at) ?? readBareInchAndAHalf(heard, at) ?? readAmount(heard, at)
}

const word = (heard: Heard, at: number) => heard.tokens[at]?.text ?? ''

function fact(heard: Heard, from: number, to: number, kind: FactKind, value: number, unit: FactUnit): SpokenFact {
  const start = heard.tokens[from]!.start
  const end = heard.tokens[to - 1]!.end
  return { atMs: heard.startMsAt(start), kind, text: heard.text.slice(start, end), value, unit }
}

/** To a tenth, halves up: 9.525 mm is 9.5, 1.5875 is 1.6. */
export const tenth = (mm: number) => Math.round(mm * 10 + 1e-9) / 10

/** Diameter in mm of an AWG wire (ASTM B258): 0.127 × 92^((36 − n) / 39). */
export const wireGaugeMm = (gauge: number) => 0.127 * 92 ** ((36 - gauge) / 39)

/** "number 8 screws", "no. 8", "#6", "8 gauge screws", "18 gauge copper". */
function readGauge(heard: Heard, at: number): Found | null {
  const first = word(heard, at)
  const named = first === 'number' || first === '#' || first === 'no' || first === 'numbers'
  if (named) {
    const from = first === 'no' && word(heard, at + 1) === '.' ? at + 2 : at + 1
    const plural: Record<string, number> = { fours: 4, sixes: 6, eights: 8, tens: 10, twelves: 12, fourteens: 14 }
    const many = plural[word(heard, from)]
    const number = many ? { value: many, to: from + 1 } : readNumber(heard.tokens, from)
    if (!number || number.value < 2 || number.value > 24 || !Number.isInteger(number.value)) return null
    if (first === 'no' && from === at + 1 && !heard.tokens[from]!.number) return null
    const plain = word(heard, number.to) === 's' && heard.tokens[number.to]!.start === heard.tokens[number.to - 1]!.end
    const after = Array.from({ length: 4 }, (_, i) => word(heard, number.to + i)).some(text => FASTENER.test(text) && text !== 'roves')
    const earlier = Array.from({ length: 20 }, (_, i) => word(heard, at - 1 - i)).some(text => /^(?:screws?|bronze|stainless|countersunk)$/.test(text))
    if (!after && !earlier && !many && !plain) return { to: number.to }
    let to = number.to
    if (word(heard, to) === 's') to++
    if (/^gauge$/.test(word(heard, to))) to++
    if (FASTENER.test(word(heard, to))) to++
    return { fact: fact(heard, at, to, 'fastener', number.value, 'count'), to }
  }
  const number = readNumber(heard.tokens, at)
  if (!number || number.article || number.form !== 'whole') return null
  let next = number.to
  if (word(heard, next) === '-') next++
  if (!/^(?:gauge|gage|awg)$/.test(word(heard, next))) return null
  const about = heard.tokens.slice(next + 1, next + 6).map(token => token.text)
  if (about.some(text => FASTENER.test(text))) return { fact: fact(heard, at, next + 1, 'fastener', number.value, 'count'), to: next + 1 }
  if (number.value > 30) return { to: next + 1 }
  return { fact: fact(heard, at, next + 1, 'thickness', tenth(wireGaugeMm(number.value)), 'mm'), to: next + 1 }
}

/** "inch and a half", with nothing before it. */
function readBareInchAndAHalf(heard: Heard, at: number): Found | null {
  const first = word(heard, at)
  if (!/^(?:inch|foot|mill?|(?:milli|centi)?met(?:er|re))$/.test(first)) return null
  if (word(heard, at + 1) !== 'and') return null
  const more = readNumber(heard.tokens, at + 2)
  if (!more || more.form !== 'fraction') return null
  return { fact: fact(heard, at, more.to, lengthKind(heard, more.to), tenth((1 + more.value) * UNITS[first]!.mm!), 'mm'), to: more.to }
}

function readAmount(heard: Heard, at: number): Found | null {
  const number = readElided(heard, at) ?? readNumber(heard.tokens, at)
  if (!number) return null
  const before = word(heard, at - 1)
  // "one of two", money, "frame two", "number three": names and prices.
  if (/^[£$€]$/.test(before)) return { to: number.to }
  if (NUMBERED.test(before) && number.form === 'whole' && !number.article && !unitAfter(heard, number.to)) return { to: number.to }
  const ratio = readRatio(heard, number)
  if (ratio) return ratio
  const by = readPair(heard, number)
  if (by) return by
  const alternative = readRange(heard, number)
  if (alternative) return alternative
  return readMeasured(heard, number) ?? readDegrees(heard, number) ?? readBareLength(heard, number) ?? readCount(heard, number) ?? (number.article ? null : { to: number.to })
}

/** "Two fifty mil", "eighteen twenty mil": a spoken 250 and 1820, unless fastenings follow, when they are so many of a size. */
function readElided(heard: Heard, at: number): SpokenNumber | null {
  const hundreds = readNumber(heard.tokens, at)
  if (!hundreds || hundreds.article || hundreds.form !== 'whole' || hundreds.to !== at + 1 || heard.tokens[at]!.number || hundreds.value < 1 || hundreds.value === 10 || hundreds.value > 19) return null
  const rest = readNumber(heard.tokens, at + 1)
  if (!rest || rest.article || rest.form !== 'whole' || heard.tokens[at + 1]!.number || rest.value < 20 || rest.value > 99) return null
  const unit = unitAfter(heard, rest.to)
  if (unit?.unit.mm !== 1) return null
  const after = [1, 2, 3].map(i => word(heard, unit.at + i))
  return after.some(text => FASTENER.test(text) || COUNTED.test(text)) ? null : { ...rest, from: at, value: hundreds.value * 100 + rest.value }
}

/** The token index of a unit that belongs to a number ending before `to`, or null: "6 mil", "3⁄8 of an inch", "quarter-inch". */
function unitAfter(heard: Heard, to: number): { at: number, unit: typeof UNITS[string] } | null {
  let at = to
  if (word(heard, at) === '-' || word(heard, at) === '–') at++
  if (word(heard, at) === 'of' && /^(?:a|an)$/.test(word(heard, at + 1))) at += 2
  else if (/^(?:a|an)$/.test(word(heard, at)) && UNITS[word(heard, at + 1)]) at++
  const text = word(heard, at)
  // A bare "m" or "in" is a word more often than a unit, unless it stands close by a figure.
  if (text === 'm' && heard.tokens[at]!.start - heard.tokens[at - 1]!.end > 1) return null
  const unit = UNITS[text]
  if (unit && /^thousandths?$/.test(text) && word(heard, at + 1) === 'of' && word(heard, at + 3) === 'inch') at += 3
  return unit ? { at, unit } : null
}

function readRatio(heard: Heard, number: SpokenNumber): Found | null {
  if (number.article || number.form !== 'whole') return null
  let at = number.to
  const text = heard.tokens
  // "five parts resin to one hardener"
  let parts = false
  if (/^parts?$/.test(word(heard, at))) {
    parts = true
    at++
    for (let skipped = 0; skipped < 4 && !/^to$/.test(word(heard, at)); skipped++) at++
  }
  const sign = word(heard, at)
  const glued = sign === ':' && text[at]!.start === text[at - 1]!.end
  // "2:30", "at 1:15": clock times; a slope of 1:20 stands without "at".
  if (glued && /^[0-5]\d$/.test(word(heard, at + 1)) && heard.tokens[at + 1]!.end - heard.tokens[at + 1]!.start === 2 && number.value <= 12 && (number.value > 1 || /^(?:at|by|until|till|about|around)$/.test(word(heard, number.from - 1)))) return { to: at + 2 }
  const inRatio = sign === 'in' && /^(?:one|1)$/.test(word(heard, at - 1))
  if (sign !== 'to' && !glued && !inRatio) {
    if (!parts && number.value === 50 && /^(?:50|fifty)$/.test(word(heard, word(heard, at) === '-' || word(heard, at) === '/' ? at + 1 : at))) {
      const to = word(heard, at) === '-' || word(heard, at) === '/' ? at + 2 : at + 1
      return { fact: fact(heard, number.from, to, 'ratio', 1, 'ratio'), to }
    }
    return null
  }
  const other = readNumber(text, at + 1)
  if (!other || other.article || other.value === 0) return null
  const unit = unitAfter(heard, other.to)
  if (unit || /^(?:degrees?|grit|percent|%|o'clock)$/.test(word(heard, other.to))) return null
  const small = Math.min(number.value, other.value)
  const large = Math.max(number.value, other.value)
  if (!parts && !inRatio && small > 3) return null
  // "from one to ten", "two to three", "10 to 1" said of a time of day.
  if (!parts && !inRatio && !glued && (word(heard, number.from - 1) === 'from' || (other.value > number.value && other.value > 1 && number.value > 1))) return null
  if (inRatio && (large < 4 || large > 40)) return null
  return { fact: fact(heard, number.from, other.to, 'ratio', round2(large / small), 'ratio'), to: other.to }
}

const round2 = (value: number) => Math.round(value * 100) / 100

/** "30 by 18 millimetres", "3⁄4 by 1 1⁄2": two lengths in one unit. "Two by four" is the name of a stud. */
function readPair(heard: Heard, number: SpokenNumber): Found | null {
  if (number.article) return null
  const own = unitAfter(heard, number.to)
  const at = own ? own.at + 1 : number.to
  if (!/^(?:by|x)$/.test(word(heard, at))) return null
  const other = readNumber(heard.tokens, at + 1)
  if (!other) return null
  const unit = unitAfter(heard, other.to) ?? own
  const fraction = number.form !== 'whole' || other.form !== 'whole'
  const mm = unit?.unit.mm ?? (fraction ? INCH : heard.inches ? null : Math.min(number.value, other.value) >= 6 ? 1 : null)
  if (!mm) return { to: other.to }
  const ownMm = own?.unit.mm ?? mm
  const to = unit && unit !== own ? unit.at + 1 : other.to
  return {
    fact: fact(heard, number.from, own ? own.at + 1 : number.to, 'length', tenth(number.value * ownMm), 'mm'),
    second: fact(heard, other.from, to, 'length', tenth(other.value * mm), 'mm'),
    to,
  }
}

/** "Six or seven strokes", "three to four inches", "between 2 and 3 mil", "an inch or two", "ten, fifteen minutes": nobody measured. */
function readRange(heard: Heard, number: SpokenNumber): Found | null {
  const own = unitAfter(heard, number.to)
  const at = own ? own.at + 1 : number.to
  const between = word(heard, at) === 'and' && word(heard, number.from - 1) === 'between'
  const comma = word(heard, at) === ',' && !own
  if (!between && !comma && !/^(?:or|to|-|–)$/.test(word(heard, at))) return null
  if ((word(heard, at) === '-' || word(heard, at) === '–') && heard.tokens[at]!.start > heard.tokens[at - 1]!.end) return null
  if (word(heard, at) === 'or' && /^(?:so|two|thereabouts|more|less)$/.test(word(heard, at + 1))) return /^(?:so|more|less|thereabouts)$/.test(word(heard, at + 1)) ? null : { to: at + 2 }
  const other = readNumber(heard.tokens, at + 1)
  if (!other || other.article) return null
  const unit = unitAfter(heard, other.to)
  if (comma && !(unit && number.form === 'whole' && other.form === 'whole' && other.value > number.value && other.value <= number.value * 2)) return null
  if (own && unit && unit.unit !== own.unit) return null
  if (own && !unit) return null
  if (own && unit && word(heard, at) === 'or') return null
  return { to: unit ? unit.at + 1 : other.to }
}

function readMeasured(heard: Heard, number: SpokenNumber): Found | null {
  const unit = unitAfter(heard, number.to)
  if (!unit) return null
  if (VAGUE_BEFORE.test(word(heard, number.from - 1))) return { to: unit.at + 1 }
  let value = number.value
  let to = unit.at + 1
  const { mm, min } = unit.unit
  // "an inch and a half", "two hours and a half"; "three foot six", "five feet 4 inches".
  if (word(heard, to) === 'and') {
    const more = readNumber(heard.tokens, to + 1)
    if (more?.form === 'fraction' && more.value < 1 && !unitAfter(heard, more.to)) {
      value += more.value
      to = more.to
    }
  }
  let total = value * (mm ?? min!)
  if (mm && /^(?:foot|feet|ft|′|')$/.test(word(heard, unit.at))) {
    const from = /^(?:and|,)$/.test(word(heard, to)) ? to + 1 : to
    const inches = readNumber(heard.tokens, from)
    if (inches && !inches.article && inches.value < 12) {
      const said = unitAfter(heard, inches.to)
      if (said ? said.unit.mm === INCH : from === to && !NOT_MEASURED.test(word(heard, inches.to)) && !COUNTED.test(word(heard, inches.to)) && !/^(?:or|by|to)$/.test(word(heard, inches.to))) {
        total += inches.value * INCH
        to = said ? said.at + 1 : inches.to
      }
    }
  }
  // "two metre fifteen", "four meters sixty": centimetres after metres.
  if (unit.unit.mm === 1000) {
    const more = readNumber(heard.tokens, to)
    if (more && !more.article && more.form === 'whole' && Number.isInteger(more.value) && more.value >= 5 && more.value < 100 && !unitAfter(heard, more.to) && !COUNTED.test(word(heard, more.to)) && !NOT_MEASURED.test(word(heard, more.to))) {
      total += more.value * 10
      to = more.to
    }
  }
  // "An hour to the inch" is a rule of thumb, not a wait.
  if (number.article && (word(heard, to) === 'or' || (/^(?:to|per|an|every)$/.test(word(heard, to)) && min))) return { to: to + 2 }
  if (min) {
    if (isIdleTime(heard, number, unit.at, to)) return { to }
    return { fact: fact(heard, number.from, to, 'time', round2(total), 'min'), to }
  }
  if (number.article && word(heard, unit.at) === 'foot' && to === unit.at + 1 && !DIMENSION.test(word(heard, to)) && !/^(?:every|by|than|over|under|about|nearly|only)$/.test(word(heard, number.from - 1))) return { to }
  if (number.article && /^(?:yard|yards)$/.test(word(heard, unit.at))) return { to }
  if (number.article && unit.unit.mm === 1 && to === unit.at + 1) return { to }
  return { fact: fact(heard, number.from, to, lengthKind(heard, to, number.from, total), unit.unit.mm! < 1 ? round2(total) : tenth(total), 'mm'), to }
}

/** Times that measure nothing in the work: "a minute ago", "two days a week", "give me a second". */
function isIdleTime(heard: Heard, number: SpokenNumber, unit: number, to: number): boolean {
  const text = word(heard, unit)
  if (number.article && /^(?:second|minute|day)/.test(text) && number.to === unit) return true
  // "In an hour there's going to be a lid on this."
  if (number.article && word(heard, number.from - 1) === 'in') return true
  if (/^(?:ago|late|early|away|left|earlier|later|off)$/.test(word(heard, to)) && !(word(heard, to) === 'later' && /^(?:minute|hour)/.test(text))) return true
  if (/^(?:days?)$/.test(text) && /^(?:in|for|past|last|every|these|about|of)$/.test(word(heard, number.from - 1)) && !/cure|epoxy|glue|varnish|paint|dry/.test(around(heard, number.from, 80))) return true
  return /^(?:day|days)$/.test(text) && number.value === 1 && !/cure|glue|dry|leave|left/.test(around(heard, number.from, 60))
}

function around(heard: Heard, at: number, characters: number): string {
  const token = heard.tokens[at]!
  return heard.lower.slice(Math.max(0, token.start - characters), token.end + characters)
}

/** Boards and sheets are no thicker than this, mm: an "eight foot sheet" is that long. */
const THICKEST = 150

function lengthKind(heard: Heard, to: number, from = to, mm = 0): FactKind {
  const after = [word(heard, to), word(heard, to + 1)]
  if (after.some(text => FASTENER.test(text)) || (FASTENER.test(word(heard, from - 2)) && /^(?:long)$/.test(word(heard, to)))) return 'fastener'
  if (mm > THICKEST) return 'length'
  return MATERIAL.test(after[0]!) || /^(?:thick)$/.test(after[1]!) ? 'thickness' : 'length'
}

function readDegrees(heard: Heard, number: SpokenNumber): Found | null {
  if (number.article) {
    // "A degree and a half".
    const more = word(heard, number.to) === 'degree' && word(heard, number.to + 1) === 'and' ? readNumber(heard.tokens, number.to + 2) : null
    return more?.form === 'fraction' ? { fact: fact(heard, number.from, more.to, 'angle', 1 + more.value, 'deg'), to: more.to } : null
  }
  let at = number.to
  if (word(heard, at) === '-') at++
  const sign = word(heard, at)
  if (!/^(?:degrees?|°)$/.test(sign)) return null
  let to = at + 1
  const scale = word(heard, to)
  const close = around(heard, number.from, 70)
  const clause = heard.lower.slice(Math.max(0, heard.tokens[number.from]!.start - 45), heard.tokens[at]!.end + 45)
  let celsius: number | null = null
  const minus = /^(?:minus|negative)$/.test(word(heard, number.from - 1))
  const from = minus ? number.from - 1 : number.from
  const value = minus ? -number.value : number.value
  const below = word(heard, to) === 'below' && /^(?:freezing|zero)$/.test(word(heard, to + 1)) ? word(heard, to + 1) : null
  if (below) {
    const fahrenheit = heard.speaker.fahrenheit
    celsius = fahrenheit ? ((below === 'zero' ? 0 : 32) - number.value - 32) / 1.8 : -number.value
    to += 2
  }
  else if (/^(?:fahrenheit|f)$/.test(scale)) {
    celsius = (value - 32) / 1.8
    to++
  }
  else if (/^(?:celsius|centigrade|c)$/.test(scale)) {
    celsius = value
    to++
  }
  else if ((minus || HEAT.test(clause)) && (!ANGLE_WORDS.test(clause) || /\b(?:in here|in the (?:shed|shop|garage|barn|workshop)|heater|temperature|thermometer|warm|cold)\b/.test(clause)) && number.value !== 90 && number.value !== 45) celsius = plausibleCelsius(value, heard.speaker, close)
  if (celsius !== null) return { fact: fact(heard, from, to, 'temperature', tenth(celsius), 'C'), to }
  if (number.value > 180) return { to }
  return { fact: fact(heard, number.from, to, 'angle', number.value, 'deg'), to }
}

/** What a number of degrees is in °C, by the speaker's habits and by what a shop can be: above 45 it is °F, below 33 it is °C, unless something is heated. */
function plausibleCelsius(value: number, speaker: Speaker, close: string): number | null {
  const heated = /\b(?:kettle|steam|boil|oven|heat gun|hot|cook|cooked|cooking|heated|warmed|warm it)\b/.test(close)
  if (speaker.fahrenheit) return value < 25 && !/below|freez/.test(close) ? value : (value - 32) / 1.8
  if (value > 45 && !heated) return value <= 120 && (speaker.inches || /\b(?:in here|in the (?:shed|shop|garage|barn|workshop|tent|room))\b/.test(close)) ? (value - 32) / 1.8 : null
  return value
}

/** "An eighth and it won't pull in", "1 1⁄2 tall", "three quarters wide", "150 apart": a length without its unit. */
function readBareLength(heard: Heard, number: SpokenNumber): Found | null {
  const next = word(heard, number.to)
  const then = word(heard, number.to + 1)
  if (NOT_MEASURED.test(next) || (next === '-' && NOT_MEASURED.test(then))) return { to: number.to }
  if (number.form !== 'whole') {
    const alone = number.form === 'fraction'
    // "Half the batch", "a quarter turn", "two thirds of the way", "a third coat".
    if ([3, 5, 6, 10].includes(number.parts)) return { to: number.to }
    if (alone && number.parts === 2 && !(DIMENSION.test(next) && /^(?:wide|thick|deep|proud)$/.test(next)) && !heard.tokens[number.from]!.number) return { to: number.to }
    if (alone && number.parts === 4 && number.value === 0.25 && !DIMENSION.test(next) && !MATERIAL.test(next) && !/^(?:sticking|showing|of daylight|bigger|smaller|wider|narrower|less|more)$/.test(next) && !heard.tokens[number.from]!.number) return { to: number.to }
    if (alone && /^(?:of)$/.test(next) && /^(?:the|it|them|an?|my|that|this|its|all)$/.test(then) && !/^(?:nothing)$/.test(then)) {
      if (number.parts < 8) return { to: number.to }
    }
    if (/^(?:turn|turns|way|full|past|hour|hours|round|done|dozen|million|time|times|sheet|coat|throttle|cup|pump)$/.test(next)) return { to: number.to }
    if (number.form === 'mixed' && number.parts === 2 && !heard.tokens[number.from]!.number && !DIMENSION.test(next) && !MATERIAL.test(next)) return { to: number.to }
    if (!heard.inches && !/[⁄/]|eighth|sixteenth/.test(heard.text.slice(heard.tokens[number.from]!.start, heard.tokens[number.to - 1]!.end))) return { to: number.to }
    return { fact: fact(heard, number.from, number.to, lengthKind(heard, number.to, number.from), tenth(number.value * INCH), 'mm'), to: number.to }
  }
  if (number.article || (number.value === 1 && !heard.tokens[number.from]!.number)) return null
  // "It's 2240 and 2243": nothing else in a metric shop has four figures.
  const metres = !heard.inches && number.value >= 150 && number.value < 12_000 && (number.value < 1900 || number.value > 2035)
  if (metres && /^(?:it's|is|at|to|and|,|that's|says|them|in)$/.test(word(heard, number.from - 1)) && /^(?:and|[.,;]|both|on|at|from|to|exactly|dead|back|forward|aft|up|down|each|because|)$/.test(next)) return { fact: fact(heard, number.from, number.to, 'length', number.value, 'mm'), to: number.to }
  const dimension = /^(?:wide|thick|deep|tall|apart|proud|oversize|diameter)$/.test(next) || (next === 'long' && !heard.inches && number.value >= 20) || /^(?:centers|centres|spacing|spacings)$/.test(next) || (/^(?:mm)$/.test(next))
  if (!dimension) return null
  if (heard.inches) return { fact: fact(heard, number.from, number.to, 'length', tenth(number.value * INCH), 'mm'), to: number.to }
  return number.value >= 3 ? { fact: fact(heard, number.from, number.to, 'length', number.value, 'mm'), to: number.to } : null
}

/** "31 holes", "five layers", "six up each side": at least three of something that is counted in a shop. */
function readCount(heard: Heard, number: SpokenNumber): Found | null {
  if (number.article || number.form !== 'whole' || !Number.isInteger(number.value) || number.value < 2 || number.value > 5000) return null
  if (word(heard, number.from - 1) === '.' && heard.tokens[number.from]!.number && heard.tokens[number.from - 1]!.end === heard.tokens[number.from]!.start) return null
  const before = word(heard, number.from - 1)
  if (/^(?:last|first|next|other)$/.test(before) && number.value >= 3 && /^(?:ribs|frames|planks|strakes|strips|screws|holes|clamps|stitches|rivets|beams|staples|boards|nails|bolts|lashings|pegs)$/.test(word(heard, number.to))) return { fact: fact(heard, number.from, number.to + 1, 'count', number.value, 'count'), to: number.to + 1 }
  if (/^(?:number|no|step|about|like|the|last|first|next|these|those|all|other|my|them|any)$/.test(before) && number.value < 6 && before !== 'about') return null
  const text = [0, 1, 2, 3].map(i => word(heard, number.to + i))
  let at = -1
  for (let i = 0; i < 3; i++) {
    if (COUNTED.test(text[i]!)) {
      at = i
      break
    }
    if (!/^(?:little|small|big|good|copper|bronze|wood|brass|more|of|the|these|those|new|full|steel|galvanized|galvanised|stainless|per|light|thin|long|short|deck|wire|extra|screw|rivet)$/.test(text[i]!)) break
  }
  if (at >= 0 && (number.value >= 3 || text[at] === 'coats')) return { fact: fact(heard, number.from, number.to + at + 1, 'count', number.value, 'count'), to: number.to + at + 1 }
  if (at >= 0) return null
  if (text[0] === 'extra' && number.value >= 3) return { fact: fact(heard, number.from, number.to + 1, 'count', number.value, 'count'), to: number.to + 1 }
  if (/^(?:in|at|to|for|on)$/.test(text[0]!) && /^(?:each|every)$/.test(text[1]!) && /^[a-z]+$/.test(text[2]!)) return { fact: fact(heard, number.from, number.to + 3, 'count', number.value, 'count'), to: number.to + 3 }
  if (/^(?:up|along|down|on|per|each|a)$/.test(text[0]!) && /^(?:each|the|per|every|a|side|outside|inside|bottom|top)$/.test(text[1]!) && /^(?:side|sides|bottom|top|outside|inside|edge|edges|end|ends|each|row|plank|strake|bay|frame|rib|foot|joint|lap|station|corner)$/.test([text[1]!, text[2]!].find(item => /^(?:side|sides|bottom|top|outside|inside|edge|edges|end|ends|row|plank|strake|bay|frame|rib|foot|joint|lap|station|corner)$/.test(item)) ?? '')) {
    const to = number.to + (text[1] === 'side' ? 2 : 3)
    // "300 each side of the middle" is a distance.
    if (number.value > 60) return null
    return { fact: fact(heard, number.from, to, 'count', number.value, 'count'), to }
  }
  if (text[0] === 'of' && /^(?:them|these|those)$/.test(text[1]!) && (number.value >= 10 || (number.value >= 4 && /^(?:there's|there|did|made|about|of|need|needs|got)$/.test(before)))) return { fact: fact(heard, number.from, number.to + 2, 'count', number.value, 'count'), to: number.to + 2 }
  return null
}
