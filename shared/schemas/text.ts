import { z } from 'zod'

// No text of ours holds control characters: PostgreSQL refuses NUL, and the rest cannot be seen or typed.
// eslint-disable-next-line no-control-regex
const CONTROLS = /[\u0000-\u0008\u000B-\u001F\u007F]/g

/** One line: white space of any kind becomes a single space. Cleaning twice changes nothing. */
export function cleanLine(text: string): string {
  return text.replace(/\s+/g, ' ').replace(CONTROLS, '').trim()
}

/** Text of many lines, with `\n` between them. Cleaning twice changes nothing. */
export function cleanProse(text: string): string {
  return text.replace(/\r\n?/g, '\n').replace(CONTROLS, '').trim()
}

/** A line of text after cleaning, at most `max` characters. */
export const line = (what: string, max: number) => z.string(`${what} must be text`).transform(cleanLine)
  .pipe(z.string().max(max, `Keep ${lower(what)} to ${max} characters`))

/** As `line`, and not empty. */
export const filledLine = (what: string, max: number, missing: string) => line(what, max).pipe(z.string().min(1, missing))

export const prose = (what: string, max: number) => z.string(`${what} must be text`).transform(cleanProse)
  .pipe(z.string().max(max, `Keep ${lower(what)} to ${max.toLocaleString('en-GB')} characters`))

/** Short texts kept as a list and written with `;` between them, so none may hold one. Empty ones and repeats fall out. */
export const lineList = (what: string, max: number, most: number) => z.array(line(what, max).pipe(z.string().regex(/^[^;]*$/, `${what}: leave out the semicolon, which separates the entries of a list`)))
  .max(most, `${what}: at most ${most} entries`)
  .transform(distinct)

/** Drops empty entries and later ones that differ only in letter case. */
export function distinct(entries: string[]): string[] {
  const seen = new Set<string>()
  return entries.filter((entry) => {
    const key = entry.toLowerCase()
    if (!entry || seen.has(key)) return false
    seen.add(key)
    return true
  })
}

function lower(what: string): string {
  return what.charAt(0).toLowerCase() + what.slice(1)
}
