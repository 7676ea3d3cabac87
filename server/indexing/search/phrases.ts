import type { Operation } from '#shared/types/trade'
import { OPERATION_LEXICON } from '../lexicon/operations'
import { SYNONYM_SETS } from '../lexicon/synonyms'
import { TOOL_OPERATIONS } from '../lexicon/tools'
import { stemsOf } from '../words/tokenise'
import type { Way } from './types'

/** A phrase of the lexicon, cut to stems, and what it stands for. */
export interface Phrase<Meaning> { stems: string[], meaning: Meaning }

const split = (phrases: string) => phrases.split(',').map(phrase => stemsOf(phrase)).filter(stems => stems.length > 0)

/** Plain words of operations, longest phrase first, so that "dry fit" is read before "fit". */
export const OPERATION_PHRASES: Phrase<Operation>[] = Object.entries(OPERATION_LEXICON)
  .flatMap(([operation, words]) => split(words.plain).map(stems => ({ stems, meaning: operation as Operation })))
  .sort((a, b) => b.stems.length - a.stems.length)

export const TOOL_PHRASES: Phrase<Operation[]>[] = Object.entries(TOOL_OPERATIONS)
  .map(([tool, operations]) => ({ stems: stemsOf(tool), meaning: operations }))
  .sort((a, b) => b.stems.length - a.stems.length)

const SYNONYMS = SYNONYM_SETS.map(set => set.map(phrase => stemsOf(phrase)))

/** Every stem the lexicon knows: such a word is never taken for a slip of the pen. */
export const LEXICON_STEMS: ReadonlySet<string> = new Set([
  ...Object.values(OPERATION_LEXICON).flatMap(words => [...split(words.plain), ...split(words.near)].flat()),
  ...TOOL_PHRASES.flatMap(phrase => phrase.stems),
  ...SYNONYMS.flat(2),
])

/** All ways of speaking of an operation; the words as asked come first and weigh most. */
export function waysOfOperation(operation: Operation, asked: string[]): Way[] {
  if (operation === 'none') return [{ stems: asked, weight: 1, finds: true }]
  const words = OPERATION_LEXICON[operation]
  return distinct([
    { stems: asked, weight: 1, finds: true },
    ...split(words.plain).map(stems => ({ stems, weight: 0.7, finds: true })),
    ...split(words.near).map(stems => ({ stems, weight: 0.2, finds: false })),
  ])
}

/** A word or phrase with its synonyms. */
export function waysOfWord(asked: string[]): Way[] {
  const same = (stems: string[]) => stems.length === asked.length && stems.every((stem, i) => stem === asked[i])
  return distinct([
    { stems: asked, weight: 1, finds: true },
    ...SYNONYMS.filter(set => set.some(same)).flat().map(stems => ({ stems, weight: 0.5, finds: true })),
  ])
}

/** Keeps the first of equal ways, which is the heaviest. */
export function distinct(ways: Way[]): Way[] {
  const seen = new Set<string>()
  return ways.filter(({ stems }) => {
    const key = stems.join(' ')
    if (seen.has(key)) return false
    seen.add(key)
    return true
  })
}

/** Length of the phrase if it stands at `at`, else 0. */
export function standsAt(stems: readonly string[], at: number, phrase: readonly string[]): number {
  return phrase.length > 0 && phrase.every((stem, i) => stems[at + i] === stem) ? phrase.length : 0
}
