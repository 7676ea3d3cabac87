import { answers } from './askedFor'
import { heardIn, taggedWith } from './hearing'
import { likeness } from './likeness'
import { weightOfConcept } from './rarity'
import type { Line } from './rows'
import type { AskedFor, Frequencies, Understanding } from './types'

/**
 * What speaks for an answer beginning at a line. `said`: the question's words (and the trade's words for them)
 * within some seconds, `saidBeside`: a little further off, `cover`: how much of the question is there at once;
 * `meant…`: the same for plain words said otherwise; `like`: words that look like one that is not said;
 * `topic`: topics of the shop that both touch; `tagged`: the chapter's tags; `planned`: the plan's words for the
 * chapter's step; `kind`, `why`, `method`: the kind of answer asked for; then what speaks against it.
 */
export const ANSWER_FEATURES = ['said', 'saidBeside', 'cover', 'meant', 'meantBeside', 'meantCover', 'like', 'topic', 'tagged', 'planned', 'kind', 'why', 'method', 'none', 'elsewhen'] as const
export type AnswerFeature = typeof ANSWER_FEATURES[number]
export const ANSWER_K = ANSWER_FEATURES.length
const F = Object.fromEntries(ANSWER_FEATURES.map((name, i) => [name, i])) as Record<AnswerFeature, number>

/** How far from the start of a line words count as its own, and as beside it; how far an answer reaches. All ms. */
const CORE_MS = 9_000
const BESIDE_MS = 22_000
const ANSWER_MS = 20_000

const ELSEWHEN = /\b(?:later|next time|next week|tomorrow|last time|last week|eventually|off camera|can wait|didn'?t film|going to have to)\b/i
const WHY = /\b(?:because|'?cause|cuz|reasons?|so that|otherwise|that way|on account of|why|since|if you|or (?:else|it|you|she)|what happens|never|don'?t|the trouble|problem)\b/i
const METHOD = /\b(?:what (?:i|you|we|one) (?:do|does|did)|the (?:trick|way|thing|answer|fix|idea)|you (?:just|want|take|put|get|go|can|press|see)|i (?:take|put|use|just|go|set|lay|made|turned|took|blow|run|walk|sight)|i'?m (?:going|just|gonna)|i'?ve got (?:a|this|the)|this (?:little )?(?:stick|block|board|thing)|and then|until|till)\b/i

type Stretch = readonly [from: number, to: number]

/** Feature values of every line of a row, line after line; and how much of the question each line says by itself. */
export function featuresOf(question: Understanding, row: Line[], frequencies: Frequencies, rarity: Rarity): { values: Float64Array, telling: Float64Array } {
  const out = new Float64Array(row.length * ANSWER_K)
  const words = saidWords(question, row, frequencies)
  const plain = meantWords(question, row, rarity)
  const topics = sharedTopics(question, row, rarity)
  const telling = Float64Array.from(row, (_, i) => words.heard.reduce((sum, values, c) => sum + words.weights[c]! * values[i]! / words.all, 0) + plain.otherwise.reduce((sum, values) => sum + values[i]! / plain.all, 0))
  let tags: Float64Array = new Float64Array(ANSWER_K)
  row.forEach((line, i) => {
    const at = i * ANSWER_K
    const core = stretchAbout(row, i, -CORE_MS, CORE_MS)
    const beside = stretchAbout(row, i, -BESIDE_MS, BESIDE_MS)
    let covered = 0
    words.heard.forEach((values, c) => {
      const weight = words.weights[c]! / words.all
      const here = most(values, core)
      const near = most(values, beside)
      out[at + F.said]! += weight * here
      out[at + F.saidBeside]! += weight * (near - here)
      covered += words.weights[c]! * Math.min(1, near)
      if (near === 0) out[at + F.like]! += weight * most(words.like[c]!, beside)
    })
    out[at + F.cover] = words.all * (covered / words.all ** 2) ** 2
    let met = 0
    plain.otherwise.forEach((values, u) => {
      const here = most(values, core)
      const near = most(values, beside)
      out[at + F.meant]! += here / plain.all
      out[at + F.meantBeside]! += (near - here) / plain.all
      met += Math.min(1, Math.max(near, most(plain.asAsked[u]!, beside)))
    })
    out[at + F.meantCover] = plain.all * (met / plain.all ** 2) ** 2
    for (const values of topics) out[at + F.topic]! += most(values, beside)
    const text = row.slice(i, stretchAbout(row, i, 0, ANSWER_MS)[1]).map(line => line.text)
    const answer = text.join(' ')
    if (question.askedFor === 'reason') out[at + F.why] = Number(WHY.test(answer))
    else if (answers(question.askedFor, answer)) out[at + F.kind] = rarity.kind
    if (question.askedFor === 'manner') out[at + F.method] = Number(METHOD.test(answer))
    out[at + F.elsewhen] = Number(ELSEWHEN.test(text.slice(0, 3).join(' ')))
    if (line.candidate !== row[i - 1]?.candidate) tags = featuresOfTags(question, line.candidate, words.weights, words.all)
    for (let k = 0; k < ANSWER_K; k++) out[at + k]! += tags[k]!
  })
  return { values: out, telling }
}

/** What the chapter of a candidate says for it, by itself: for stretches in which nothing is said. */
export function featuresOfTags(question: Understanding, { chapter, ...candidate }: Line['candidate'], weights: number[], all: number): Float64Array {
  const out = new Float64Array(ANSWER_K)
  if (!chapter) return out
  question.concepts.forEach((concept, c) => { out[F.tagged]! += weights[c]! * taggedWith(concept, { chapter, ...candidate }) / all })
  const sure = chapter.inking === 'inked' ? 1 : chapter.confidence ?? 0.5
  if (chapter.stepId) out[F.planned] = (question.about.get(chapter.stepId) ?? 0) * (0.3 + 0.7 * sure)
  if (chapter.operation === 'none') out[F.none] = 0.5 + sure / 2
  return out
}

/** The weights of a question's concepts, and the root of their sum, by which long questions are held against short ones. */
export function weightsOf(question: Understanding, frequencies: Frequencies): { weights: number[], all: number } {
  const weights = question.concepts.map(concept => weightOfConcept(concept, frequencies))
  return { weights, all: Math.sqrt(weights.reduce((sum, weight) => sum + weight, 0) || 1) }
}

function saidWords(question: Understanding, row: Line[], frequencies: Frequencies) {
  return {
    ...weightsOf(question, frequencies),
    heard: question.concepts.map(concept => row.map((line, i) => Math.min(1.2, heardIn(concept, line.tokens, row[i + 1]?.tokens)))),
    // A word that is nowhere near may still be there in another form, or mis-heard.
    like: question.concepts.map((concept) => {
      const asked = [...new Set(concept.ways.filter(way => way.weight === 1).flatMap(way => way.stems))].filter(stem => stem.length > 3)
      const seen = new Map<string, number>()
      const likest = (stem: string) => {
        const known = seen.get(stem)
        if (known !== undefined) return known
        const value = stem.length > 3 ? Math.max(0, ...asked.map(one => likeness(one, stem))) : 0
        seen.set(stem, value)
        return value
      }
      return row.map(line => Math.max(0, ...line.stems.map(likest)))
    }),
  }
}

/** For each plain word of the question: how telling another word for it is where one is said, and where it is said itself. */
function meantWords(question: Understanding, row: Line[], rarity: Rarity) {
  const asAsked = question.meant.map(({ stems }) => row.map(line => Number(stems.every(stem => line.stems.includes(stem)))))
  return {
    all: Math.sqrt(question.meant.length || 1),
    asAsked,
    // A word of many meanings is met by chance.
    otherwise: question.meant.map(({ meanings }, u) => row.map((line, i) => asAsked[u]![i]
      ? 0
      : Math.max(0, ...meanings.map(meaning => line.meanings.has(meaning) ? rarity.meaning(meaning) : 0)) / Math.sqrt(meanings.length))),
  }
}

function sharedTopics(question: Understanding, row: Line[], rarity: Rarity): number[][] {
  const asked = [...question.topics]
  const length = Math.sqrt(asked.reduce((sum, [topic, weight]) => sum + (weight * rarity.topic(topic)) ** 2, 0)) || 1
  return asked.map(([topic, weight]) => row.map(line => (line.topics.get(topic) ?? 0) * weight * rarity.topic(topic) / length))
}

/** The lines that start within some time of a line. */
function stretchAbout(row: Line[], i: number, from: number, to: number): Stretch {
  const { startMs } = row[i]!
  let a = i
  while (a > 0 && row[a - 1]!.startMs - startMs >= from) a--
  let b = i
  while (b < row.length && row[b]!.startMs - startMs < to) b++
  return [a, b]
}

function most(values: number[], [from, to]: Stretch): number {
  let best = 0
  for (let i = from; i < to; i++) if (values[i]! > best) best = values[i]!
  return best
}

/** How telling meanings and topics are, over the lines at hand: 0 to about 1. */
export interface Rarity { meaning(id: number): number, topic(id: number): number, /** Of the kind of answer that is asked for: an angle is seldom given, a number often. */ kind: number }

export function rarityIn(rows: Line[][], askedFor: AskedFor | null): Rarity {
  let lines = 0
  let kind = 0
  const meanings = new Map<number, number>()
  const topics = new Map<number, number>()
  for (const line of rows.flat()) {
    lines++
    if (answers(askedFor, line.text)) kind++
    for (const meaning of line.meanings) meanings.set(meaning, (meanings.get(meaning) ?? 0) + 1)
    for (const topic of line.topics.keys()) topics.set(topic, (topics.get(topic) ?? 0) + 1)
  }
  const rare = (n: number) => Math.log(1 + (lines - n + 0.5) / (n + 0.5)) / 4
  return { kind: rare(kind), meaning: id => rare(meanings.get(id) ?? 0), topic: id => rare(topics.get(id) ?? 0) }
}
