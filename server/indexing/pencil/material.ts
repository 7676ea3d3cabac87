import { hearKinds, HEARD_COLUMNS } from './kindEvidence'
import type { Speech } from './speech'
import { hearSteps, STEP_FEATURES, type StepIndex } from './stepEvidence'
import { hearTurns, TURN_FEATURES } from './turns'
import { type Learned, WORK_KINDS } from './types'

const KS = STEP_FEATURES.length
const KT = TURN_FEATURES.length
const C = HEARD_COLUMNS.length
const W = WORK_KINDS.length

/** A fixed stretch in terms of cues: [from, to), with its state. Kind as the lattice counts. */
export interface FixedStretch { from: number, to: number, step: number | null, kind: number }

/** Everything that is heard in a session, as numbers; the weights come later. */
export interface Material {
  speech: Speech
  index: StepIndex
  S: number
  /** cue × step × feature */
  steps: Float32Array
  /** cue × step: plain sums used for openings */
  openWords: Float32Array
  openTopic: Float32Array
  /** cue × column */
  kinds: Float32Array
  /** cue × feature */
  turns: Float32Array
  /** From a cue's start to the next cue's start in the same clip, s. */
  seconds: Float64Array
  /** Talk that touches the plan at all, per cue, 0 to about 2. */
  shop: Float32Array
  /** 0 to 1: how near the beginning, and the end, of the session. */
  start: Float32Array
  end: Float32Array
  nodes: number[]
  fixed: FixedStretch[]
}

/** Longest chapter that is weighed as one, s; a longer one is still found when it is all there is. */
export const LONGEST_CHAPTER_S = 150

/** Where a portion stands in its session, in cues; `ordered` when the day's steps are known, and go down the plan. */
export interface PlaceInDay { from: number, whole: number, ordered: boolean }

/** How long a greeting and a goodbye colour what is said, s: less in a short session. */
const GREETING_S = 25
const GOODBYE_S = 20
const GREETING_SHARE = 0.03

/** `day` is left out for a session that is weighed whole and of which nothing is known. */
export function gather(speech: Speech, index: StepIndex, learned: readonly Learned[] = [], fixed: FixedStretch[] = [], day?: PlaceInDay): Material {
  const S = index.steps.length
  const n = speech.cues.length
  const kinds = hearKinds(speech)
  const turns = hearTurns(speech)
  const seconds = new Float64Array(n)
  const start = new Float32Array(n)
  const end = new Float32Array(n)
  const shop = new Float32Array(n)
  const openWords = new Float32Array(n * S)
  const openTopic = new Float32Array(n * S)
  let whole = 0
  for (let i = 0; i < n; i++) {
    const cue = speech.cues[i]!
    const next = speech.cues[i + 1]
    seconds[i] = (next && next.clip === cue.clip ? next.startMs - cue.startMs : cue.endMs - cue.startMs) / 1000
    // The silence before it, as `gapMs` has it: the first cue of a portion may stand in the middle of a clip.
    if (cue.first) seconds[i]! += Math.min(10, cue.gapMs / 1000)
    whole += seconds[i]!
  }
  const steps = hearSteps(speech, index, learned, day?.ordered ? { at: placesInDay(seconds, day), seconds } : undefined)
  const first = !day || day.from === 0
  const last = !day || day.from + n >= day.whole
  const greeting = Math.min(GREETING_S, Math.max(3, whole * GREETING_SHARE))
  const goodbye = greeting * GOODBYE_S / GREETING_S
  let passed = 0
  for (let i = 0; i < n; i++) {
    start[i] = first ? Math.exp(-passed / greeting) : 0
    passed += seconds[i]!
    end[i] = last ? Math.exp(-Math.max(0, whole - passed) / goodbye) : 0
    let most = 0
    for (let s = 0; s < S; s++) {
      const at = (i * S + s) * KS
      const words = steps[at]! + steps[at + 1]! + steps[at + 2]!
      openWords[i * S + s] = words
      openTopic[i * S + s] = steps[at + 4]!
      most = Math.max(most, words + steps[at + 4]!)
    }
    let heard = 0
    for (let c = 0; c < W; c++) heard += kinds[i * C + c]!
    shop[i] = Math.min(2, most / 3 + heard / 3)
  }
  return { speech, index, S, steps, openWords, openTopic, kinds, turns, seconds, shop, start, end, nodes: nodesOf(speech, turns, fixed), fixed }
}

/** How much of the day has passed at each cue, 0 to 1. `from` and `whole` are cues: what came before, and all. */
function placesInDay(seconds: Float64Array, day: PlaceInDay): Float64Array {
  const all = seconds.reduce((sum, value) => sum + value, 0)
  const share = seconds.length / Math.max(1, day.whole)
  let passed = 0
  return seconds.map((value) => {
    const at = day.from / Math.max(1, day.whole) + share * (passed + value / 2) / Math.max(1e-9, all)
    passed += value
    return at
  })
}

/** Where a chapter may start: not in the middle of a sentence, nor more often than about every fifth second. */
function nodesOf(speech: Speech, turns: Float32Array, fixed: FixedStretch[]): number[] {
  const n = speech.cues.length
  const forced = new Set([0, n, ...fixed.flatMap(({ from, to }) => [from, to]), ...speech.cues.flatMap((cue, i) => cue.first ? [i] : [])])
  const likely = (i: number) => {
    const f = (name: typeof TURN_FEATURES[number]) => turns[i * KT + TURN_FEATURES.indexOf(name)]!
    return 2 * f('okay') + 1.5 * f('so') + 1.2 * f('next') + 0.8 * f('while') + 0.8 * f('here') + 1.5 * f('gap') + 2 * f('pause') + f('sound') + f('scene') + 0.8 * f('sentence') - f('dangling') - 0.7 * f('because') - f('midSentence') + f('newWords')
  }
  const nodes: number[] = []
  const inside = (i: number) => fixed.some(({ from, to }) => i > from && i < to)
  const scores = Array.from({ length: n }, (_, i) => i ? likely(i) : 9)
  const sorted = [...scores].sort((a, b) => b - a)
  // About half of all cues, and every one that has a turn in it.
  const bar = Math.min(2.2, sorted[Math.floor(n * 0.55)] ?? 0)
  for (let i = 0; i <= n; i++) if (forced.has(i) || (!inside(i) && scores[i]! >= bar)) nodes.push(i)
  return nodes
}
