import { TOPICS } from '../lexicon/topics'
import { HEARD } from '../lexicon/heard'
import { isStopWord, tokenise } from '../words/tokenise'
import { PhraseBook } from './phrases'
import type { Speech } from './speech'
import { type Learned, type PlanPart, type PlanStep, WORK_KINDS } from './types'
import { TOPIC_BOOK } from './topicBook'

/** How a cue can speak for a step; each is a number for every cue and step. */
export const STEP_FEATURES = ['title', 'description', 'part', 'material', 'topic', 'operation', 'learned', 'elsewhen', 'place', 'farPlace'] as const
const K = STEP_FEATURES.length
const [TITLE, DESCRIPTION, PART, MATERIAL, TOPIC, OPERATION, LEARNED, ELSEWHEN, PLACE, FAR_PLACE] = STEP_FEATURES.map((_, i) => i) as [number, number, number, number, number, number, number, number, number, number]

const OPERATION_BOOK = new PhraseBook(WORK_KINDS.flatMap((kind, i) => HEARD[kind].map(({ phrase, weight }) => [phrase, { kind: i, weight }] as const)))

/** What the plan says of each step, ready to be held against speech. */
export interface StepIndex {
  steps: PlanStep[]
  /** Where each step stands in the plan (or among the steps of the day), for how far a move goes. */
  places: number[]
  /** Stem → for each step that has it, how much it says of it, by feature. */
  words: Map<string, { step: number, feature: number, weight: number }[]>
  names: PhraseBook<{ steps: { step: number, weight: number }[] }>
  /** Topic → steps that touch it, with weights. */
  topics: { step: number, weight: number }[][]
  /** Step × operation: 0 to 1, how much the plan's own words speak of the operation; in the title, and anywhere. */
  operationsInTitle: Float32Array
  operationsInText: Float32Array
}

const stemsIn = (text: string) => tokenise(text).map(token => token.stem)
const telling = (text: string) => new Set(tokenise(text).filter(token => !isStopWord(token.word)).map(token => token.stem))

function topicWeights(text: string): Map<number, number> {
  const heard = new Map<number, Map<number, number>>()
  const stems = stemsIn(text)
  TOPIC_BOOK.find(stems, ({ topic, weight }, at, length) => {
    const places = heard.get(topic) ?? new Map<number, number>()
    places.set(at, Math.max(places.get(at) ?? 0, weight * (length > 1 ? 1.3 : 1)))
    heard.set(topic, places)
  })
  return new Map([...heard].map(([topic, places]) => [topic, [...places.values()].reduce((sum, weight) => sum + weight, 0)]))
}

function operationsOf(text: string): Float32Array {
  const sums = new Float32Array(WORK_KINDS.length)
  OPERATION_BOOK.find(stemsIn(text), ({ kind, weight }) => { sums[kind]! += weight })
  for (let i = 0; i < sums.length; i++) sums[i] = Math.min(1, sums[i]!)
  return sums
}

/** Reads a plan for what each step would sound like: its words by rarity in this plan, the names of its parts, topics and operations. */
export function indexSteps(steps: PlanStep[], parts: readonly PlanPart[]): StepIndex {
  const partByName = new Map(parts.map(part => [part.name.toLowerCase(), part]))
  const fields = steps.map((step) => {
    const named = step.parts.flatMap(name => partByName.get(name.toLowerCase()) ?? [])
    return { title: telling(step.title), description: telling(step.description), material: telling(`${step.materials.join(' ')} ${step.stage} ${named.map(part => part.material).join(' ')}`), parts: named }
  })
  const documents = new Map<string, number>()
  for (const field of fields) {
    const names = field.parts.flatMap(part => [...telling([part.name, ...part.aliases].join(' '))])
    for (const stem of new Set([...field.title, ...field.description, ...names])) documents.set(stem, (documents.get(stem) ?? 0) + 1)
  }
  const rarity = (n: number) => Math.log(1 + (steps.length - n + 0.5) / (n + 0.5))
  const words: StepIndex['words'] = new Map()
  const add = (stem: string, step: number, feature: number, weight: number) => {
    const known = words.get(stem)
    if (known) known.push({ step, feature, weight })
    else words.set(stem, [{ step, feature, weight }])
  }
  fields.forEach((field, step) => {
    for (const stem of field.title) add(stem, step, TITLE, rarity(documents.get(stem) ?? 0))
    for (const stem of field.description) add(stem, step, DESCRIPTION, rarity(documents.get(stem) ?? 0))
    for (const stem of field.material) add(stem, step, MATERIAL, rarity(fields.filter(other => other.material.has(stem)).length))
  })
  const names = new Map<string, Set<number>>()
  fields.forEach((field, step) => {
    for (const part of field.parts) for (const name of [part.name, ...part.aliases, lastWord(part.name)]) {
      const key = stemsIn(name).join(' ')
      if (key) names.set(key, (names.get(key) ?? new Set()).add(step))
    }
  })
  // A title that names a part speaks of it more than one that only uses it.
  const book = new PhraseBook([...names].map(([name, of]) => [name, {
    steps: [...of].map(step => ({ step, weight: rarity(of.size) * (name.split(' ').every(stem => fields[step]!.title.has(stem)) ? 1.5 : 1) })),
  }] as const))

  const touched = steps.map((step, i) => {
    const sums = new Map<number, number>()
    const lend = (text: string, weight: number) => { for (const [topic, sum] of topicWeights(text)) sums.set(topic, (sums.get(topic) ?? 0) + sum * weight) }
    lend(step.title, 2)
    lend(step.description, 1)
    lend(step.materials.join(', '), 0.5)
    lend(fields[i]!.parts.map(part => part.name).join(', '), 0.7)
    return new Map([...sums].map(([topic, sum]) => [topic, Math.sqrt(sum)]))
  })
  const topics = TOPICS.map((_, topic) => {
    const of = touched.flatMap((sums, step) => sums.has(topic) ? [{ step, weight: sums.get(topic)! }] : [])
    const spread = of.reduce((sum, { weight }) => sum + Math.min(1, weight / 2), 0)
    const rare = Math.log(1 + steps.length / (spread + 0.5)) / 3
    return of.map(({ step, weight }) => ({ step, weight: weight * rare }))
  })
  const operationsInTitle = new Float32Array(steps.length * WORK_KINDS.length)
  const operationsInText = new Float32Array(steps.length * WORK_KINDS.length)
  steps.forEach((step, i) => {
    operationsInTitle.set(operationsOf(step.title), i * WORK_KINDS.length)
    operationsInText.set(operationsOf(`${step.title}. ${step.description}. ${step.materials.join(', ')}`), i * WORK_KINDS.length)
  })
  return { steps, places: steps.map((_, i) => i), words, names: book, topics, operationsInTitle, operationsInText }
}

function lastWord(name: string): string {
  const words = name.split(/\s+/)
  return words.length > 1 ? words.at(-1)! : ''
}

/** How soon a word said again counts in full, ms. */
const AGAIN_MS = 40_000

/**
 * What each cue says for each step: cue × step × feature. A word said again soon counts less, so that one word
 * does not drown the others; what is said of other times goes to a feature of its own.
 */
export function hearSteps(speech: Speech, index: StepIndex, learned: readonly Learned[] = [], passed?: Passed): Float32Array {
  const S = index.steps.length
  const out = new Float32Array(speech.cues.length * S * K)
  const lastSaid = new Map<string, { atMs: number, times: number }>()
  const fresh = (key: string, at: number) => {
    const { atMs } = speech.words[at]!
    const last = lastSaid.get(key)
    const times = last && atMs >= last.atMs ? last.times * Math.exp(-(atMs - last.atMs) / AGAIN_MS) : 0
    lastSaid.set(key, { atMs, times: times + 1 })
    return 1 / (1 + times)
  }
  const put = (cue: number, step: number, feature: number, amount: number, present: number) => {
    const at = (cue * S + step) * K
    out[at + feature]! += amount
    if (!present) out[at + ELSEWHEN]! += amount
  }
  speech.words.forEach((word, at) => {
    const known = word.stop ? undefined : index.words.get(word.stem)
    if (!known) return
    const amount = fresh(`w${word.stem}`, at)
    for (const { step, feature, weight } of known) put(word.cue, step, feature, weight * amount, word.present)
  })
  index.names.find(speech.stems, ({ steps }, at, length) => {
    const word = speech.words[at]!
    const amount = fresh(`n${speech.stems.slice(at, at + length).join(' ')}`, at) * (length > 1 ? 1.4 : 1)
    for (const { step, weight } of steps) put(word.cue, step, PART, weight * amount, word.present)
  })
  TOPIC_BOOK.find(speech.stems, ({ topic, weight }, at, length) => {
    const of = index.topics[topic]!
    if (!of.length) return
    const word = speech.words[at]!
    const amount = fresh(`t${topic} ${speech.stems.slice(at, at + length).join(' ')}`, at) * weight * (length > 1 ? 1.3 : 1)
    for (const one of of) put(word.cue, one.step, TOPIC, one.weight * amount, word.present)
  })
  OPERATION_BOOK.find(speech.stems, ({ kind, weight }, at, length) => {
    const word = speech.words[at]!
    const amount = fresh(`o${kind} ${speech.stems.slice(at, at + length).join(' ')}`, at) * weight
    for (let step = 0; step < S; step++) {
      const of = index.operationsInText[step * WORK_KINDS.length + kind]!
      if (of) out[(word.cue * S + step) * K + OPERATION]! += of * amount
    }
  })
  if (learned.length) hearLearned(speech, index, learned, (cue, step, amount) => { out[(cue * S + step) * K + LEARNED]! += amount })
  centre(out, S)
  if (passed) placeSteps(out, S, passed)
  return out
}

/** How far into the session each cue starts, 0 to 1, and how long it lasts, s. */
export interface Passed { at: Float64Array, seconds: Float64Array }

/** A day's work goes down the plan: how far a step lies from where the session stands, for each cue by its length. */
function placeSteps(out: Float32Array, S: number, { at, seconds }: Passed): void {
  for (let cue = 0; cue < at.length; cue++) {
    const time = Math.min(8, seconds[cue]!) / 10
    for (let s = 0; s < S; s++) {
      const off = Math.abs((s + 0.5) / S - at[cue]!)
      out[(cue * S + s) * K + PLACE] = -off * time
      out[(cue * S + s) * K + FAR_PLACE] = -Math.max(0, off - 0.3) * time
    }
  }
}

/** Words that the builder used before of a step and seldom of others. */
function hearLearned(speech: Speech, index: StepIndex, learned: readonly Learned[], put: (cue: number, step: number, amount: number) => void): void {
  const stepAt = new Map(index.steps.map((step, i) => [step.number, i]))
  const said = new Map<string, Map<number, number>>()
  for (const { step, text } of learned) {
    const at = stepAt.get(step)
    if (at === undefined) continue
    for (const stem of telling(text)) {
      const of = said.get(stem) ?? new Map<number, number>()
      of.set(at, (of.get(at) ?? 0) + 1)
      said.set(stem, of)
    }
  }
  const taught = new Set(learned.map(({ step }) => step)).size
  for (const word of speech.words) {
    const of = word.stop ? undefined : said.get(word.stem)
    if (!of) continue
    const rare = Math.log(1 + taught / of.size)
    for (const [step, times] of of) put(word.cue, step, rare * times / (times + 1))
  }
}

/** Takes from each number the mean over the steps: what speaks for all speaks for none. */
function centre(out: Float32Array, S: number): void {
  if (!S) return
  const cues = out.length / (S * K)
  for (let cue = 0; cue < cues; cue++) {
    for (let k = 0; k < K; k++) {
      let sum = 0
      for (let step = 0; step < S; step++) sum += out[(cue * S + step) * K + k]!
      if (!sum) continue
      const mean = sum / S
      for (let step = 0; step < S; step++) out[(cue * S + step) * K + k]! -= mean
    }
  }
}
