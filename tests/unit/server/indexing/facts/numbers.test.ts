import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readNumber } from '#server/indexing/facts/numbers'
import { factTokens } from '#server/indexing/facts/tokens'

const read = (text: string) => readNumber(factTokens(text), 0)

const SMALL = 'zero one two three four five six seven eight nine ten eleven twelve thirteen fourteen fifteen sixteen seventeen eighteen nineteen'.split(' ')
const TENS = ' ten twenty thirty forty fifty sixty seventy eighty ninety'.split(' ')
/** A number in words as people say it, by rules of our own. */
function inWords(n: number, joint: string): string {
  if (n >= 1000) return `${inWords(Math.floor(n / 1000), joint)} thousand${n % 1000 ? ` ${inWords(n % 1000, joint)}` : ''}`
  if (n >= 100) return `${SMALL[Math.floor(n / 100)]} hundred${n % 100 ? ` and ${inWords(n % 100, joint)}` : ''}`
  return n < 20 ? SMALL[n]! : `${TENS[Math.floor(n / 10)]}${n % 10 ? `${joint}${SMALL[n % 10]}` : ''}`
}

describe('numbers, spoken and written', () => {
  it('reads every whole number to 9,999 in words and in figures', () => {
    const wrong: string[] = []
    for (let n = 0; n < 10_000; n += n < 200 ? 1 : 13) {
      const grouped = n < 1000 ? String(n) : `${Math.floor(n / 1000)},${String(n % 1000).padStart(3, '0')}`
      for (const text of [inWords(n, ' '), inWords(n, '-'), String(n), grouped]) if (read(text)?.value !== n) wrong.push(text)
    }
    expect(wrong).toEqual([])
  })

  it.each([
    ['a hundred', 100], ['hundred and fifty', 150], ['a hundred and ten', 110], ['eighteen hundred', 1800],
    ['a dozen', 12], ['half a dozen', 6], ['two dozen', 24], ['3 dozen', 36],
    ['2.5', 2.5], ['.5', 0.5], ['two point five', 2.5], ['one point two five', 1.25], ['six point 3', 6.3],
  ])('%s is %s, a whole', (text, value) => expect(read(text)).toMatchObject({ value, form: 'whole', article: false, to: factTokens(text).length }))

  it.each([
    ['½', 1 / 2], ['3/8', 3 / 8], ['3⁄8', 3 / 8], ['⅞', 7 / 8], ['half', 1 / 2], ['a half', 1 / 2], ['three quarters', 3 / 4], ['three-quarters', 3 / 4],
    ['three quarter', 3 / 4], ['three eighths', 3 / 8], ['three eights', 3 / 8], ['a sixteenth', 1 / 16], ['eleven sixteenths', 11 / 16], ['5 sixteenths', 5 / 16],
    ['two thirds', 2 / 3], ['a tenth', 1 / 10], ['a thirty-second', 1 / 32], ['three thirty seconds', 3 / 32], ['a sixty-fourth', 1 / 64], ['5/64', 5 / 64],
  ])('%s is %s, a fraction', (text, value) => expect(read(text)).toMatchObject({ value, form: 'fraction', to: factTokens(text).length }))

  it.each([
    ['1 1⁄2', 1.5], ['1 1/2', 1.5], ['1½', 1.5], ['1-1/2', 1.5], ['one and a half', 1.5], ['2 and three eighths', 2.375], ['twelve and a half', 12.5],
    ['twenty two and three quarters', 22.75], ['three and 5/16', 3.3125],
  ])('%s is %s, a whole with a fraction', (text, value) => expect(read(text)).toMatchObject({ value, form: 'mixed', to: factTokens(text).length }))

  it.each([['twenty three four', 23, 1], ['five six', 5, 1], ['three and four', 3, 2], ['forty fifty', 40, 1], ['one two three', 1, 2]])('stops where %s starts another number', (text, value, left) => {
    const number = read(text)!
    expect(number.value).toBe(value)
    expect(factTokens(text).length - number.to).toBe(left)
  })

  it.each(['', 'inch', 'an eight', 'dozen', 'thousand', 'the', '24/7', '1/250'])('does not make a fraction or a number of “%s”', (text) => {
    const number = read(text)
    expect(number === null || number.form === 'whole').toBe(true)
    if (/^(?:|inch|dozen|thousand|the)$/.test(text)) expect(number).toBeNull()
  })

  it('knows "a" alone from a number', () => {
    expect(read('an inch')).toMatchObject({ value: 1, article: true, to: 1 })
    expect(read('one inch')).toMatchObject({ value: 1, article: false, to: 1 })
  })

  it('never reads past the end nor stands still', () => {
    const word = fc.constantFrom('a', 'one', 'half', 'and', 'thirty', 'seconds', '-', 'eighths', '3', '/', '8', 'hundred', 'dozen', 'point', '½', 'sixty', 'fourth')
    fc.assert(fc.property(fc.array(word, { maxLength: 8 }), (words) => {
      const tokens = factTokens(words.join(' '))
      for (let from = 0; from <= tokens.length; from++) {
        const number = readNumber(tokens, from)
        if (!number) continue
        expect(number.to).toBeGreaterThan(from)
        expect(number.to).toBeLessThanOrEqual(tokens.length)
        expect(Number.isFinite(number.value)).toBe(true)
      }
    }))
  })
})
