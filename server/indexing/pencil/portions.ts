import type { FixedStretch, Material } from './material'
import type { Weights } from './model'
import type { Speech } from './speech'
import { STEP_FEATURES } from './stepEvidence'
import { WORK_KINDS } from './types'

/** A row of cues that is weighed by itself: [from, to). */
export interface Portion { from: number, to: number }

/** About forty minutes of talk: longer sessions are weighed in portions, so that time and memory grow with length alone. */
const MOST_CUES = 480

/** Cuts a session into portions, at the edges of clips where they come soon enough, else at the longest silence. */
export function portionsOf(speech: Speech, fixed: readonly FixedStretch[], most = MOST_CUES): Portion[] {
  const n = speech.cues.length
  const portions: Portion[] = []
  let from = 0
  while (n - from > most) {
    let cut = -1
    let best = -Infinity
    for (let i = from + Math.floor(most / 2); i <= from + most; i++) {
      if (fixed.some(stretch => i > stretch.from && i < stretch.to)) continue
      const cue = speech.cues[i]!
      const worth = (cue.first ? 1e7 : 0) + cue.gapMs
      if (worth >= best) {
        best = worth
        cut = i
      }
    }
    // One fixed chapter lies over every place: cut before it, or behind it when it starts the portion.
    const over = cut < 0 ? fixed.find(stretch => from + most > stretch.from && from + most < stretch.to) : undefined
    if (cut < 0) cut = !over ? from + most : over.from > from ? over.from : over.to
    portions.push({ from, to: cut })
    from = cut
  }
  if (from < n || !n) portions.push({ from, to: n })
  return portions
}

/** A portion as speech of its own. */
export function takePortion(speech: Speech, { from, to }: Portion): Speech {
  const firstWord = speech.cues[from]?.from ?? 0
  const lastWord = speech.cues[to - 1]?.to ?? firstWord
  return {
    punctuated: speech.punctuated,
    stems: speech.stems.slice(firstWord, lastWord),
    words: speech.words.slice(firstWord, lastWord).map(word => ({ ...word, cue: word.cue - from })),
    cues: speech.cues.slice(from, to).map((cue, i) => ({ ...cue, from: cue.from - firstWord, to: cue.to - firstWord, first: cue.first || i === 0 })),
  }
}

/** Cues about a place that are heard together when steps are picked. */
const ABOUT = 8

/** Leaves the steps that come into question at all, at most so many; the fixed ones always. Order and distance in the plan are kept. */
export function narrow(material: Material, weights: Weights, most: number): Material {
  const { S, index, speech } = material
  if (S <= most) return material
  const K = STEP_FEATURES.length
  const of = STEP_FEATURES.map(name => weights[`step.${name}`] ?? 0)
  const n = speech.cues.length
  const top = new Float64Array(S).fill(-Infinity)
  for (let s = 0; s < S; s++) {
    let sum = 0
    const row = new Float64Array(n)
    for (let cue = 0; cue < n; cue++) {
      const at = (cue * S + s) * K
      for (let k = 0; k < K; k++) row[cue]! += of[k]! * material.steps[at + k]!
      sum += row[cue]! - (cue >= ABOUT ? row[cue - ABOUT]! : 0)
      if (sum > top[s]!) top[s] = sum
    }
  }
  const kept = [...top.keys()].sort((a, b) => top[b]! - top[a]!).slice(0, most)
  for (const { step } of material.fixed) if (step !== null && !kept.includes(step)) kept.push(step)
  kept.sort((a, b) => a - b)
  const pick = (table: Float32Array, rows: number, width: number) => {
    const out = new Float32Array(rows * kept.length * width)
    for (let row = 0; row < rows; row++) kept.forEach((s, to) => out.set(table.subarray((row * S + s) * width, (row * S + s + 1) * width), (row * kept.length + to) * width))
    return out
  }
  const W = WORK_KINDS.length
  return {
    ...material,
    S: kept.length,
    index: { ...index, steps: kept.map(s => index.steps[s]!), places: kept.map(s => index.places[s]!), operationsInTitle: pick(index.operationsInTitle, 1, W), operationsInText: pick(index.operationsInText, 1, W) },
    steps: pick(material.steps, n, K),
    openWords: pick(material.openWords, n, 1),
    openTopic: pick(material.openTopic, n, 1),
    fixed: material.fixed.map(stretch => ({ ...stretch, step: stretch.step === null ? null : kept.indexOf(stretch.step) })),
  }
}
