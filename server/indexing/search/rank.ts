import type { Inking, Operation } from '#shared/types/trade'
import { ANSWER_WEIGHTS } from './answerWeights'
import { ANSWER_FEATURES, ANSWER_K, type AnswerFeature, featuresOf, featuresOfTags, rarityIn, weightsOf } from './features'
import { type Line, rowsOf } from './rows'
import type { Frequencies, Understanding } from './types'

/** A passage that may answer, with the tags of the chapter it lies in as they stand now. */
export interface Candidate {
  id: string
  clipId: string
  /** Caption file of its lines; lines of one file are read in one row. */
  trackId?: string | null
  startMs: number
  endMs: number
  starts: number[]
  lines: string[]
  chapter: null | { id: string, startMs: number, endMs: number, stepId: string | null, operation: Operation, inking: Inking, confidence: number | null, partIds: string[] }
  /** Stems of the tags' words. */
  tagStems: ReadonlySet<string>
}

export interface Ranked<Of extends Candidate = Candidate> {
  candidate: Of
  /** Higher is better; comparable within one question only. */
  score: number
  /** Where the answer starts, ms on the clip. */
  atMs: number
  /** Index of that line; -1 when the tags alone answered. */
  line: number
}

export type AnswerWeights = Readonly<Record<AnswerFeature, number>>

/** Lines near one another speak for one another: an answer is a run of lines. The reach of it, ms. */
export const SMOOTH_MS = 18_000
/** Answers nearer than this are one answer, ms. */
const SPREAD_MS = 20_000

/**
 * Ranks candidates by what is said about each of their lines and what their chapters are tagged with, weighed as
 * labelled questions taught (`answerWeights.ts`). The lines of neighbouring candidates are read in one row, so that an
 * answer that runs over the edge of a passage is found whole. Order: score, then clip and time, so that paging
 * is stable.
 */
export function rank<Of extends Candidate>(question: Understanding, candidates: Of[], frequencies: Frequencies, weights: AnswerWeights = ANSWER_WEIGHTS): Ranked<Of>[] {
  const rows = rowsOf(candidates)
  const rarity = rarityIn(rows, question.askedFor)
  const best = new Map<Of, Ranked<Of>>()
  for (const row of rows) {
    const { values, telling } = featuresOf(question, row, frequencies, rarity)
    const scores = smooth(row.map(line => line.startMs), scoresOf(values, weights))
    for (let from = 0; from < row.length;) {
      const { candidate } = row[from]!
      const to = from + candidate.lines.length
      let top = from
      for (let i = from; i < to; i++) if (scores[i]! > scores[top]!) top = i
      // A stretch in which nothing asked for is said answers by its tags, as a whole, from its start.
      const speaks = telling.subarray(from, to).some(value => value > 0)
      const line = row[beginning(row, telling, from, top, to)]!
      best.set(candidate, { candidate, score: scores[top]!, atMs: speaks ? line.startMs : candidate.startMs, line: speaks ? line.index : -1 })
      from = to
    }
  }
  const { weights: concepts, all } = weightsOf(question, frequencies)
  for (const candidate of candidates) {
    if (!best.has(candidate)) best.set(candidate, { candidate, score: scoresOf(featuresOfTags(question, candidate, concepts, all), weights)[0]!, atMs: candidate.startMs, line: -1 })
  }
  return [...best.values()]
    .map(moment => ({ ...moment, score: Math.round(moment.score * 1e6) / 1e6 }))
    .sort((a, b) => b.score - a.score || compare(a.candidate.clipId, b.candidate.clipId) || a.candidate.startMs - b.candidate.startMs || compare(a.candidate.id, b.candidate.id))
}

/** Leaves out moments that lie next to a better one: seconds later on the same clip is no second answer. */
export function spread<Of extends Ranked>(ranked: Of[]): Of[] {
  const taken = new Map<string, number[]>()
  return ranked.filter(({ candidate, atMs }) => {
    const beside = taken.get(candidate.clipId) ?? []
    if (beside.some(other => Math.abs(other - atMs) < SPREAD_MS)) return false
    taken.set(candidate.clipId, [...beside, atMs])
    return true
  })
}

const compare = (a: string, b: string) => a < b ? -1 : a > b ? 1 : 0

/** Lines this near the likeliest one may begin its answer, ms. */
const BACK_MS = 3_000
const ON_MS = 8_000
/** Of the most telling line nearby: a line that says this share of what it says begins the answer. */
const BEGINS = 0.7

/** The first line about the likeliest one that says something of what was asked; lines `from` to `to` are its passage. */
function beginning(row: Line[], telling: Float64Array, from: number, top: number, to: number): number {
  const at = row[top]!.startMs
  const near: number[] = []
  for (let i = from; i < to; i++) if (row[i]!.startMs >= at - BACK_MS && row[i]!.startMs <= at + ON_MS) near.push(i)
  const most = Math.max(...near.map(i => telling[i]!))
  return most > 0 ? near.find(i => telling[i]! >= BEGINS * most)! : top
}

export function scoresOf(features: Float64Array, weights: AnswerWeights): Float64Array {
  const row = ANSWER_FEATURES.map(name => weights[name])
  const scores = new Float64Array(features.length / ANSWER_K)
  for (let i = 0; i < scores.length; i++) for (let k = 0; k < ANSWER_K; k++) scores[i]! += row[k]! * features[i * ANSWER_K + k]!
  return scores
}

/** The log of the likelihood about each line, nearer lines counting more; scores are logs of likelihoods. */
export function smooth(starts: number[], scores: Float64Array): Float64Array {
  const out = new Float64Array(scores.length)
  for (let i = 0; i < scores.length; i++) {
    let from = i
    while (from > 0 && starts[i]! - starts[from - 1]! < SMOOTH_MS) from--
    let to = i + 1
    while (to < starts.length && starts[to]! - starts[i]! < SMOOTH_MS) to++
    // Measured from the highest score there: the exponent of a bare score may be beyond any number.
    const top = Math.max(...scores.subarray(from, to))
    let sum = 0
    for (let j = from; j < to; j++) sum += Math.exp(scores[j]! - top) * (1 - Math.abs(starts[j]! - starts[i]!) / SMOOTH_MS)
    out[i] = top + Math.log(Math.max(sum, Number.MIN_VALUE))
  }
  return out
}
