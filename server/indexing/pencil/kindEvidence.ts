import { HEARD } from '../lexicon/heard'
import { PhraseBook } from './phrases'
import type { Speech } from './speech'
import { WORK_KINDS } from './types'

/** How much of each operation's talk is heard in each cue, the last column being chat: cue × 15. */
export const HEARD_COLUMNS = [...WORK_KINDS, 'none'] as const
const C = HEARD_COLUMNS.length

const BOOK = new PhraseBook(HEARD_COLUMNS.flatMap((kind, i) => HEARD[kind].map(({ phrase, weight }) => [phrase, { column: i, weight }] as const)))
const AGAIN_MS = 25_000

/** Amounts are shared out: a word of one operation alone counts more than a word of five. */
export function hearKinds(speech: Speech): Float32Array {
  const out = new Float32Array(speech.cues.length * C)
  const columnsOf = new Map<string, number>()
  const found: { column: number, amount: number, cue: number, key: string }[] = []
  const last = new Map<string, { atMs: number, times: number }>()
  BOOK.find(speech.stems, ({ column, weight }, at, length) => {
    const word = speech.words[at]!
    const phrase = speech.stems.slice(at, at + length).join(' ')
    const key = `${at} ${length}`
    columnsOf.set(key, (columnsOf.get(key) ?? 0) + weight)
    const mine = `${column} ${phrase}`
    const before = last.get(mine)
    const times = before && word.atMs >= before.atMs ? before.times * Math.exp(-(word.atMs - before.atMs) / AGAIN_MS) : 0
    last.set(mine, { atMs: word.atMs, times: times + 1 })
    found.push({ column, amount: weight * (length > 1 ? 1.5 : 1) / (1 + times) * (word.present ? 1 : 0.6), cue: word.cue, key })
  })
  for (const { column, amount, cue, key } of found) out[cue * C + column]! += amount / Math.max(1, columnsOf.get(key)!)
  return out
}
