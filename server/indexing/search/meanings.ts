import { EVERYDAY_SETS } from '../lexicon/everyday'
import { PhraseBook } from '../pencil/phrases'
import { TOPIC_BOOK } from '../pencil/topicBook'

const MEANINGS = new PhraseBook(EVERYDAY_SETS.flatMap((set, meaning) => set.map(phrase => [phrase, meaning] as const)))

/** A word or phrase of a question and the meanings it may have (numbers of sets of `everyday.ts`). */
export interface Meant { stems: string[], meanings: number[] }

/** The words of a question that have other plain words beside them; longer phrases are read before the words in them. */
export function meantIn(stems: readonly string[]): Meant[] {
  const places = new Map<string, { at: number, length: number, meanings: number[] }>()
  MEANINGS.find(stems, (meaning, at, length) => {
    const key = `${at} ${length}`
    const place = places.get(key) ?? { at, length, meanings: [] }
    if (!place.meanings.includes(meaning)) place.meanings.push(meaning)
    places.set(key, place)
  })
  const longest = [...places.values()].sort((a, b) => b.length - a.length || a.at - b.at)
  const taken: typeof longest = []
  for (const place of longest) if (!taken.some(other => place.at < other.at + other.length && other.at < place.at + place.length)) taken.push(place)
  const seen = new Set<string>()
  return taken.sort((a, b) => a.at - b.at).map(({ at, length, meanings }) => ({ stems: stems.slice(at, at + length), meanings }))
    .filter(({ stems }) => !seen.has(stems.join(' ')) && seen.add(stems.join(' ')))
}

/** Every meaning that a row of stems touches. */
export function meaningsIn(stems: readonly string[]): Set<number> {
  const found = new Set<number>()
  MEANINGS.find(stems, meaning => found.add(meaning))
  return found
}

/** Topics that a row of stems touches, with the weight of the most telling word of each. */
export function topicsIn(stems: readonly string[]): Map<number, number> {
  const found = new Map<number, number>()
  TOPIC_BOOK.find(stems, ({ topic, weight }) => found.set(topic, Math.max(found.get(topic) ?? 0, weight)))
  return found
}
