import { pencilChapters } from '#server/indexing/pencil/pencil'
import { ANSWER_FEATURES, ANSWER_K as K, featuresOf, rarityIn } from '#server/indexing/search/features'
import type { AnswerWeights } from '#server/indexing/search/rank'
import { rowsOf } from '#server/indexing/search/rows'
import { searchableSession, type SearchableSession } from '#server/indexing/search/sessionCandidates'
import { understand } from '#server/indexing/search/understand'
import type { LabelledSession } from './load'

/** One question over one session: what speaks for each line as the beginning of its answer, and which lines are right. */
export interface AskedLines { build: string, q: string, starts: number[], features: Float64Array, right: boolean[] }

/** Starts that count as right: from 5 s before the true span to its end, ms. */
export const EARLY_MS = 5_000

export function searchable(session: LabelledSession): SearchableSession {
  const clips = [{ cues: session.cues, durationMs: session.truth.durationMs }]
  return searchableSession(session.steps, session.parts, clips, pencilChapters({ steps: session.steps, parts: session.parts, clips }))
}

export function linesOf(session: LabelledSession): AskedLines[] {
  const { plan, candidates, frequencies } = searchable(session)
  const rows = rowsOf(candidates)
  return session.truth.questions.map(({ q, startMs, endMs }) => {
    const question = understand(q, plan)
    const rarity = rarityIn(rows, question.askedFor)
    const starts = rows.flatMap(row => row.map(line => line.startMs))
    const features = new Float64Array(starts.length * K)
    let at = 0
    for (const row of rows) {
      const { values } = featuresOf(question, row, frequencies, rarity)
      features.set(values, at)
      at += values.length
    }
    return { build: session.build, q, starts, features, right: starts.map(start => start >= startMs - EARLY_MS && start <= endMs) }
  })
}

const ELSEWHEN_AT_MOST = -0.4

/**
 * What a weight is drawn towards where labelled questions say little: few of them have talk of other days about their
 * words, but what "can wait" is never how it was done; and who asks for a measure wants one.
 */
const PRIOR: Partial<AnswerWeights> = { elsewhen: -2.5, kind: 3 }

/**
 * Weights that make right lines likely: softmax over a session's lines, log of the mass on right ones, every weight
 * drawn towards its prior (mostly nothing) by `pull` (Adam over standardised features; the same data give the same weights).
 */
export function fitAnswers(asked: AskedLines[], pull = 5, rounds = 150): AnswerWeights {
  const scale = scales(asked)
  const w = new Float64Array(K)
  const m = new Float64Array(K)
  const v = new Float64Array(K)
  for (let round = 1; round <= rounds; round++) {
    const gradient = new Float64Array(K)
    for (const one of asked) addGradient(one, w, scale, gradient)
    for (let k = 0; k < K; k++) {
      const g = gradient[k]! + pull * (w[k]! - (PRIOR[ANSWER_FEATURES[k]!] ?? 0) * scale[k]!)
      m[k] = 0.9 * m[k]! + 0.1 * g
      v[k] = 0.99 * v[k]! + 0.01 * g * g
      w[k]! -= 0.1 * (m[k]! / (1 - 0.9 ** round)) / (Math.sqrt(v[k]! / (1 - 0.99 ** round)) + 1e-8)
    }
  }
  const fitted = Object.fromEntries(ANSWER_FEATURES.map((name, k) => [name, Number((w[k]! / scale[k]!).toFixed(3))])) as unknown as AnswerWeights
  // Viewers ask of what is done; what is said of another day never gains by it, whatever a few odd questions teach.
  return { ...fitted, elsewhen: Math.min(fitted.elsewhen, ELSEWHEN_AT_MOST) }
}

function addGradient(one: AskedLines, w: Float64Array, scale: Float64Array, gradient: Float64Array): void {
  const scores = one.starts.map((_, i) => {
    let score = 0
    for (let k = 0; k < K; k++) score += w[k]! * one.features[i * K + k]! / scale[k]!
    return score
  })
  const top = Math.max(...scores)
  const likely = scores.map(score => Math.exp(score - top))
  const whole = likely.reduce((sum, value) => sum + value, 0)
  const right = likely.reduce((sum, value, i) => one.right[i] ? sum + value : sum, 0)
  if (!right) return
  likely.forEach((value, i) => {
    const g = value / whole - (one.right[i] ? value / right : 0)
    for (let k = 0; k < K; k++) gradient[k]! += g * one.features[i * K + k]! / scale[k]!
  })
}

/** Standard deviation of every feature. */
function scales(asked: AskedLines[]): Float64Array {
  const sums = new Float64Array(K)
  const squares = new Float64Array(K)
  let n = 0
  for (const one of asked) {
    for (let i = 0; i < one.starts.length; i++, n++) {
      for (let k = 0; k < K; k++) {
        const x = one.features[i * K + k]!
        sums[k]! += x
        squares[k]! += x * x
      }
    }
  }
  return sums.map((sum, k) => Math.sqrt(Math.max(1e-6, squares[k]! / n - (sum / n) ** 2)))
}
