import { HEARD } from '../lexicon/heard'
import { isStopWord, tokenise } from '../words/tokenise'
import { PhraseBook } from './phrases'
import type { Speech } from './speech'
import type { EvidenceWords, PlanPart, PlanStep } from './types'
import type { Operation } from '#shared/types/trade'
import { TOPIC_BOOK } from './topicBook'

const MOST = 6
const operationBooks = new Map<Operation, PhraseBook<number>>()

function operationBook(operation: Operation): PhraseBook<number> {
  const known = operationBooks.get(operation)
  if (known) return known
  const book = new PhraseBook(HEARD[operation].map(({ phrase, weight }) => [phrase, weight] as const))
  operationBooks.set(operation, book)
  return book
}

/** The words that spoke for a step and an operation between two cues, the most telling ones, in order of time. */
export function evidenceOf(speech: Speech, from: number, to: number, step: PlanStep | null, operation: Operation, parts: readonly PlanPart[]): EvidenceWords[] {
  const first = speech.cues[from]?.from ?? 0
  const last = speech.cues[to - 1]?.to ?? first
  const stems = speech.stems.slice(first, last)
  const found = new Map<string, { at: number, length: number, weight: number }>()
  const put = (at: number, length: number, weight: number) => {
    const key = stems.slice(at, at + length).join(' ')
    const known = found.get(key)
    if (known) known.weight += weight / 2
    else found.set(key, { at, length, weight })
  }
  operationBook(operation).find(stems, (weight, at, length) => put(at, length, weight))
  if (step) {
    const named = parts.filter(part => step.parts.includes(part.name))
    new PhraseBook(named.flatMap(part => [part.name, ...part.aliases]).map(name => [name, 2] as const)).find(stems, (weight, at, length) => put(at, length, weight))
    const told = new Map<string, number>()
    for (const [text, weight] of [[step.description, 1], [step.materials.join(' '), 0.7], [step.title, 1.6]] as const) {
      for (const token of tokenise(text)) if (!isStopWord(token.word)) told.set(token.stem, weight)
    }
    stems.forEach((stem, at) => {
      const weight = told.get(stem)
      if (weight) put(at, 1, weight)
    })
    const topics = new Set<number>()
    TOPIC_BOOK.find(tokenise(`${step.title}. ${step.description}`).map(token => token.stem), ({ topic, weight }) => { if (weight > 1) topics.add(topic) })
    TOPIC_BOOK.find(stems, ({ topic, weight }, at, length) => { if (topics.has(topic) && weight > 1) put(at, length, 0.8) })
  }
  const best = [...found.values()].sort((a, b) => b.weight - a.weight || a.at - b.at)
  const taken: typeof best = []
  for (const one of best) {
    if (taken.length >= MOST) break
    if (!taken.some(other => one.at < other.at + other.length && other.at < one.at + one.length)) taken.push(one)
  }
  return taken.sort((a, b) => a.at - b.at).map(({ at, length }) => ({
    atMs: speech.words[first + at]!.atMs,
    words: speech.words.slice(first + at, first + at + length).map(word => word.word).join(' '),
  }))
}

/** Parts that are named between two cues, or the step's own when none is; the most named first. */
export function partsIn(speech: Speech, from: number, to: number, step: PlanStep | null, book: PhraseBook<string[]>): string[] {
  const first = speech.cues[from]?.from ?? 0
  const last = speech.cues[to - 1]?.to ?? first
  const times = new Map<string, number>()
  book.find(speech.stems.slice(first, last), (names) => {
    // A name that several parts share stands for the one that the step uses.
    const meant = names.length > 1 && step ? names.filter(name => step.parts.includes(name)) : names
    for (const name of meant) times.set(name, (times.get(name) ?? 0) + 1 / meant.length)
  })
  const named = [...times].filter(([name]) => !step || step.parts.includes(name) || (times.get(name) ?? 0) >= 2).sort((a, b) => b[1] - a[1]).map(([name]) => name)
  if (named.length || !step) return named.slice(0, 6)
  return step.parts.slice(0, 3)
}

/** Every name of every part, and which parts it may mean. */
export function partBook(parts: readonly PlanPart[]): PhraseBook<string[]> {
  const names = new Map<string, string[]>()
  for (const part of parts) for (const name of [part.name, ...part.aliases]) names.set(name.toLowerCase(), [...(names.get(name.toLowerCase()) ?? []), part.name])
  return new PhraseBook([...names])
}
