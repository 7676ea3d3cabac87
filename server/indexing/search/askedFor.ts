import type { AskedFor } from './types'

const QUESTIONS: [RegExp, AskedFor][] = [
  [/\bhow (?:long|many (?:minutes|hours|days)).*\b(?:cure|set|wait|leave|left|dry|take|took|clamped|pot life|open|have|had|need|last|stay|go off|epoxy|glue|resin|varnish|paint)\b|\bhow many (?:minutes|hours|days)\b|\bcure time\b|\bpot life\b|\bwhen\b/, 'time'],
  [/\bwhat temperature|\bhow (?:hot|cold|warm)\b/, 'temperature'],
  [/\bwhat (?:angle|bevel)|\bhow (?:many degrees|steep)\b/, 'angle'],
  [/\bratio\b|\bhow (?:much|many).*\bto\b|\bmix(?:ed|ing)? (?:at|ratio)\b|\bslope\b/, 'ratio'],
  [/\bhow many\b|\bhow much\b/, 'count'],
  [/\bhow (?:long|wide|thick|deep|high|tall|far|big|large|close|tight|often)\b|\bwhat (?:size|width|length|thickness|spacing|radius|diameter|depth|height)\b/, 'length'],
  [/\bwhy\b|\bwhat for\b|\breason\b/, 'reason'],
  [/\bwhat (?:kind|type|sort|glue|epoxy|adhesive|paint|varnish|screws?|nails?|fasteners?|wood|timber|plywood|filler|tool)\b|\bwhich (?:glue|epoxy|adhesive|paint|screws?|nails?|wood)\b/, 'product'],
  [/\bhow\b/, 'manner'],
]

/** What kind of answer a question wants, from its turn of phrase; null when it is not a question. */
export function readAskedFor(question: string): AskedFor | null {
  const text = question.toLowerCase()
  return QUESTIONS.find(([pattern]) => pattern.test(text))?.[1] ?? null
}

const NUMBER = String.raw`(?:\d|[¼-¾⅐-⅞]|\b(?:one|two|three|four|five|six|seven|eight|nine|ten|eleven|twelve|half|quarter|quarters|dozen|couple)\b)`
const ANSWERS: Partial<Record<AskedFor, RegExp>> = {
  length: new RegExp(`${NUMBER}.*\\b(?:inch|inches|in|foot|feet|mm|mil|millimet|cm|eighths?|sixteenths?|quarters?|halfs?)`, 'i'),
  angle: new RegExp(`${NUMBER}.*\\bdegree|\\b(?:angle|bevel) (?:is|of)\\b`, 'i'),
  time: new RegExp(`${NUMBER}.*\\b(?:minutes?|hours?|days?|weeks?|seconds?)\\b|\\bovernight\\b|\\btomorrow\\b`, 'i'),
  count: new RegExp(NUMBER, 'i'),
  ratio: new RegExp(`${NUMBER}\\s*(?:parts?\\s*)?(?:to|:)\\s*${NUMBER}`, 'i'),
  temperature: new RegExp(`${NUMBER}.*\\b(?:degrees?|celsius|fahrenheit)\\b|\\bheater\\b`, 'i'),
  reason: /\bbecause\b|\bso that\b|\breason\b|\botherwise\b|\bthat way\b|\bif you\b/i,
}

/** True when a text holds the kind of answer asked for. */
export function answers(askedFor: AskedFor | null, text: string): boolean {
  return (askedFor !== null && ANSWERS[askedFor]?.test(text)) ?? false
}
