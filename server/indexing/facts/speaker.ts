/** Which measures a speaker uses, told from all that is said: it decides what "60 degrees in here" is, and a bare "60 wide". */
export interface Speaker { inches: boolean, fahrenheit: boolean }

const count = (text: string, pattern: RegExp) => text.match(pattern)?.length ?? 0

/** @param text all that is said in a session; @param units what the build is drawn in, for a session that says neither */
export function hearSpeaker(text: string, units: 'inch' | 'mm' | null = null): Speaker {
  const imperial = count(text, /\b(?:inch|inches|foot|feet|thou)\b|\d\s*["″]|(?:\b(?:sixteenths?|eighths?)\b)|[⅛⅜⅝⅞]|\d[⁄/](?:8|16|32)\b/gi)
  const metric = count(text, /\b(?:mil|mils|mill|mills|mm|cm|millimet(?:er|re)s?|centimet(?:er|re)s?|met(?:er|re)s?|ml|litres?)\b/gi)
  const inches = imperial === metric ? units !== 'mm' : imperial > metric
  if (/\bfahrenheit\b/i.test(text)) return { inches, fahrenheit: true }
  if (/\b(?:celsius|centigrade)\b/i.test(text)) return { inches, fahrenheit: false }
  const british = count(text, /\b(?:colour|centre|metre|litre|tyre|grey|mould|mum|lovely|wee|whilst|bloke|reckon|mate|cheers|proper|shed|hoover|bin|tin|rubbish|cuppa|biscuit|holiday|telly|fortnight|spanner|bloody|flippin)s?\b/gi)
  return { inches, fahrenheit: inches && british < 4 }
}
