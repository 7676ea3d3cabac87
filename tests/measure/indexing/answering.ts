import { pencilChapters } from '#server/indexing/pencil/pencil'
import { ANSWER_FEATURES, featuresOf, K, rarityIn } from '#server/indexing/search/features'
import { rowsOf } from '#server/indexing/search/rows'
import { searchableSession } from '#server/indexing/search/sessionCandidates'
import { understand } from '#server/indexing/search/understand'
import type { LabelledSession } from './load'

/** One question over one session: what speaks for each line as the beginning of its answer, and which lines are right. */
export interface AskedLines { build: string, q: string, starts: number[], features: Float64Array, right: boolean[] }

/** Starts that count as right: from 5 s before the true span to its end, ms. */
export const EARLY_MS = 5_000

export function linesOf(session: LabelledSession): AskedLines[] {
  const clips = [{ cues: session.cues, durationMs: session.truth.durationMs }]
  const { plan, candidates, frequencies } = searchableSession(session.steps, session.parts, clips, pencilChapters({ steps: session.steps, parts: session.parts, clips }))
  const rows = rowsOf(candidates)
  const rarity = rarityIn(rows)
  return session.truth.questions.map(({ q, startMs, endMs }) => {
    const question = understand(q, plan)
    const starts = rows.flatMap(row => row.map(line => line.startMs))
    const features = new Float64Array(starts.length * K)
    let at = 0
    for (const row of rows) {
      const values = featuresOf(question, row, frequencies, rarity)
      features.set(values, at)
      at += values.length
    }
    return { build: session.build, q, starts, features, right: starts.map(start => start >= startMs - EARLY_MS && start <= endMs) }
  })
}

/** Weights that make right lines likely: softmax over a session's lines, log of the mass on right ones, drawn towards nothing by `pull`. */
export function fitAnswers(asked: AskedLines[], pull = 2, rounds = 400): number[] {
  const sd = scales(asked)
  const w = new Float64Array(K)
  const m = new Float64Array(K)
  const v = new Float64Array(K)
  for (let round = 1; round <= rounds; round++) {
    const gradient = new Float64Array(K)
    for (const one of asked) {
      const n = one.starts.length
      const scores = new Float64Array(n)
      let top = -Infinity
      for (let i = 0; i < n; i++) {
        let s = 0
        for (let k = 0; k < K; k++) s += w[k]! * one.features[i * K + k]! / sd[k]!
        scores[i] = s
        if (s > top) top = s
      }
      let whole = 0
      let right = 0
      for (let i = 0; i < n; i++) {
        scores[i] = Math.exp(scores[i]! - top)
        whole += scores[i]!
        if (one.right[i]) right += scores[i]!
      }
      if (!right) continue
      for (let i = 0; i < n; i++) {
        const g = scores[i]! / whole - (one.right[i] ? scores[i]! / right : 0)
        for (let k = 0; k < K; k++) gradient[k]! += g * one.features[i * K + k]! / sd[k]!
      }
    }
    for (let k = 0; k < K; k++) {
      const g = gradient[k]! + pull * w[k]!
      m[k] = 0.9 * m[k]! + 0.1 * g
      v[k] = 0.99 * v[k]! + 0.01 * g * g
      w[k]! -= 0.05 * (m[k]! / (1 - 0.9 ** round)) / (Math.sqrt(v[k]! / (1 - 0.99 ** round)) + 1e-8)
    }
  }
  return [...w].map((value, k) => value / sd[k]!)
}

function scales(asked: AskedLines[]): Float64Array {
  const sd = new Float64Array(K)
  for (let k = 0; k < K; k++) {
    let sum = 0
    let squares = 0
    let n = 0
    for (const one of asked) for (let i = 0; i < one.starts.length; i++) {
      const x = one.features[i * K + k]!
      sum += x
      squares += x * x
      n++
    }
    sd[k] = Math.sqrt(Math.max(1e-6, squares / n - (sum / n) ** 2))
  }
  return sd
}

export const named = (weights: number[]) => Object.fromEntries(ANSWER_FEATURES.map((name, k) => [name, Number(weights[k]!.toFixed(3))]))
