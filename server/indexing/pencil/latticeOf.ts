import { HEARD_COLUMNS } from './kindEvidence'
import { KINDS, type Lattice, W } from './lattice'
import { LONGEST_CHAPTER_S, type Material } from './material'
import { BY_JUDGEMENT, type Weights } from './model'
import { STEP_FEATURES } from './stepEvidence'
import { TURN_FEATURES } from './turns'
import { WORK_KINDS } from './types'

const KS = STEP_FEATURES.length
const KT = TURN_FEATURES.length
const C = HEARD_COLUMNS.length
export const CLEAN_UP = WORK_KINDS.indexOf('clean-up')
export const PLAN_TALK = WORK_KINDS.indexOf('plan-talk')
const CHAT = C - 1
export const OPENING_CUES = 3
/** Unit of the rates that go with a chapter's length, s, and how far they count. */
export const LONG_UNIT_S = 20
export const LONG_MOST_S = 90
/** Score of parting one stretch of the same work in two: so low that only one that is too long to be weighed as one is. */
const GO_ON = -9

/** The features of moving from one step to another, by name, given to `each`. */
export function moveFeatures(material: Material, from: number, to: number, each: (name: string, value: number) => void): void {
  const { steps, places } = material.index
  if (from === 0) return each('to.first', 1)
  const a = from - 1
  if (a === to) return each('to.resume', 1)
  const by = places[to]! - places[a]!
  each(by === 1 ? 'to.plus1' : by === 2 ? 'to.plus2' : by >= 3 && by <= 5 ? 'to.plus3to5' : by > 5 ? 'to.further' : by === -1 ? 'to.minus1' : 'to.back', 1)
  const mine = new Set(steps[a]!.parts)
  const shared = steps[to]!.parts.filter(part => mine.has(part)).length
  if (shared) each('to.sharedParts', shared / Math.max(mine.size, steps[to]!.parts.length))
  if (steps[a]!.stage === steps[to]!.stage) each('to.sameStage', 1)
}

/** The features of going on with another operation on the same step. */
export function changeFeatures(from: number, to: number, each: (name: string, value: number) => void): void {
  if (from === PLAN_TALK) each('then.fromPlanTalk', 1)
  else if (to === PLAN_TALK) each('then.toPlanTalk', 1)
  else if (to === CLEAN_UP) each('then.toCleanUp', 1)
  else each(to > from ? 'then.forward' : 'then.back', 1)
}

export function lengthFeatures(seconds: number, prefix: 'length' | 'stepless', each: (name: string, value: number) => void): void {
  const log = Math.log(Math.max(2, seconds) / 45)
  if (seconds < 12) each(`${prefix}.under12`, 1)
  if (seconds < 25) each(`${prefix}.under25`, 1)
  each(`${prefix}.log`, log)
  each(`${prefix}.logSquared`, log * log)
}

/** Sums over cues from the first up to each: (n + 1) × width. */
function running(n: number, width: number, value: (cue: number, at: number) => number): Float64Array {
  const sums = new Float64Array((n + 1) * width)
  for (let cue = 0; cue < n; cue++) for (let at = 0; at < width; at++) sums[(cue + 1) * width + at] = sums[cue * width + at]! + value(cue, at)
  return sums
}

/** What the first words of a chapter say of its kind, by name. */
export function openingFeatures(material: Material, cue: number, kind: number, each: (name: string, value: number) => void): void {
  const column = kind < W ? kind : kind === W ? CHAT : kind === W + 1 ? PLAN_TALK : CLEAN_UP
  each('opening.heard', material.kinds[cue * C + column]!)
}

/** Per-second and per-word score of a kind in one cue, by name. */
export function kindFeatures(material: Material, cue: number, kind: number, each: (name: string, value: number) => void): void {
  const { kinds, seconds, shop, start, end } = material
  const time = Math.min(8, seconds[cue]!) / 10
  const row = cue * C
  if (kind < W) {
    each(`rate.${WORK_KINDS[kind]!}`, time)
    each(kind === PLAN_TALK ? 'heard.planTalk' : kind === CLEAN_UP ? 'heard.cleanUp' : 'heard.work', kinds[row + kind]!)
    each('heard.chatInWork', kinds[row + CHAT]!)
  }
  else if (kind === W) {
    each('none.rate', time)
    each('none.chat', kinds[row + CHAT]!)
    each('none.shop', shop[cue]!)
    each('none.start', start[cue]!)
    each('none.end', end[cue]!)
  }
  else if (kind === W + 1) {
    each('stepless.rate', time)
    each('stepless.planTalk', kinds[row + PLAN_TALK]!)
    each('stepless.start', start[cue]!)
    each('stepless.shop', shop[cue]!)
  }
  else {
    each('stepless.cleanUpRate', time)
    each('stepless.cleanUp', kinds[row + CLEAN_UP]!)
  }
}

/** How many steps are weighed at a place, when the plan has more; and how far about it evidence is gathered, cues. */
const ALIVE = 10
/** The likeliest of each reach that are weighed; together they are mostly about `ALIVE`. */
const ALIVE_EACH = 6
const ABOUT = [4, 10, 24]

/** Cue × step: 1 where a step is among the likeliest thereabouts. Keeps long plans and long sessions quick. */
function aliveSteps(material: Material, sums: Float64Array): Uint8Array {
  const { S, speech } = material
  const n = speech.cues.length
  const alive = new Uint8Array(n * S)
  if (S <= ALIVE) return alive.fill(1)
  const scores = new Float64Array(S)
  const order = Array.from({ length: S }, (_, s) => s)
  for (let cue = 0; cue < n; cue++) {
    for (const about of ABOUT) {
      const from = Math.max(0, cue - about) * S
      const to = Math.min(n, cue + about + 1) * S
      for (let s = 0; s < S; s++) scores[s] = sums[to + s]! - sums[from + s]!
      order.sort((a, b) => scores[b]! - scores[a]!)
      for (let at = 0; at < ALIVE_EACH; at++) alive[cue * S + order[at]!] = 1
    }
  }
  return alive
}

/** The scores of a session under given weights; `startsOn` is the step worked on before it, 1-based, 0 for none. */
export function latticeOf(material: Material, fitted: Weights, startsOn = 0): Lattice {
  const weights = { ...fitted, ...BY_JUDGEMENT }
  const { S, speech, nodes, fixed } = material
  const n = speech.cues.length
  const stepWeights = STEP_FEATURES.map(name => weights[`step.${name}`] ?? 0)
  const stepSums = running(n, S, (cue, s) => {
    let sum = 0
    const at = (cue * S + s) * KS
    for (let k = 0; k < KS; k++) sum += stepWeights[k]! * material.steps[at + k]!
    return sum
  })
  const openSums = running(n, S, (cue, s) => (weights['opening.words'] ?? 0) * material.openWords[cue * S + s]! + (weights['opening.topic'] ?? 0) * material.openTopic[cue * S + s]!)
  const kindSums = running(n, KINDS, (cue, kind) => {
    let sum = 0
    kindFeatures(material, cue, kind, (name, value) => { sum += (weights[name] ?? 0) * value })
    return sum
  })
  const openKinds = running(n, KINDS, (cue, kind) => {
    let sum = 0
    openingFeatures(material, cue, kind, (name, value) => { sum += (weights[name] ?? 0) * value })
    return sum
  })
  const alive = aliveSteps(material, stepSums)
  const aliveSums = running(n, S, (cue, s) => alive[cue * S + s]!)
  const timeSums = running(n, 1, cue => material.seconds[cue]!)
  const fit = new Float64Array(S * W)
  const fitRate = new Float64Array(S * W)
  for (let at = 0; at < S * W; at++) {
    const title = material.index.operationsInTitle[at]!
    const text = material.index.operationsInText[at]!
    fit[at] = (weights['kind.inTitle'] ?? 0) * title + (weights['kind.inText'] ?? 0) * text + (text ? 0 : weights['kind.notInText'] ?? 0)
    fitRate[at] = (weights['kind.inTitleRate'] ?? 0) * title + (weights['kind.inTextRate'] ?? 0) * text
  }
  const scoreOf = (features: (each: (name: string, value: number) => void) => void) => {
    let sum = 0
    features((name, value) => { sum += (weights[name] ?? 0) * value })
    return sum
  }
  const move = new Float64Array((S + 1) * S)
  for (let from = 0; from <= S; from++) for (let to = 0; to < S; to++) move[from * S + to] = scoreOf(each => moveFeatures(material, from, to, each))
  const change = new Float64Array(W * W)
  for (let from = 0; from < W; from++) for (let to = 0; to < W; to++) change[from * W + to] = from === to ? GO_ON : scoreOf(each => changeFeatures(from, to, each))
  const turnWeights = TURN_FEATURES.map(name => weights[`turn.${name}`] ?? 0)
  const turnOf = nodes.map((cue) => {
    if (cue >= n) return 0
    let sum = 0
    for (let k = 0; k < KT; k++) sum += turnWeights[k]! * material.turns[cue * KT + k]!
    return sum
  })
  const seconds = (i: number, j: number) => timeSums[nodes[j]!]! - timeSums[nodes[i]!]!

  // A chapter ends where its clip does, and at the edges of what is fixed.
  const edges = new Set([...speech.cues.flatMap((cue, at) => cue.first ? [at] : []), ...fixed.flatMap(({ from, to }) => [from, to])])
  const lastEdge: number[] = []
  nodes.forEach((cue, node) => { lastEdge[node] = node && edges.has(cue) ? node : lastEdge[node - 1] ?? 0 })
  const earliestNode = nodes.map((_, j) => {
    if (!j) return 0
    // The edge at j itself does not count: the chapter ends there.
    const edge = lastEdge[j - 1]!
    if (fixed.some(({ to }) => to === nodes[j]!)) return edge
    let i = j - 1
    while (i > edge && seconds(i - 1, j) <= LONGEST_CHAPTER_S) i--
    return i
  })
  const fixedAt = new Map(fixed.map(stretch => [`${stretch.from} ${stretch.to}`, { step: stretch.step, kind: stretch.kind }]))
  const fixedTo = new Map(fixed.map(stretch => [stretch.to, stretch.from]))
  return {
    S,
    startsOn,
    nodes,
    earliest: j => earliestNode[j]!,
    allowed: (i, j) => {
      const from = fixedTo.get(nodes[j]!)
      return from === undefined || nodes[i] === from
    },
    only: (i, j) => fixedAt.size ? fixedAt.get(`${nodes[i]!} ${nodes[j]!}`) ?? null : null,
    alive: (i, j, s) => aliveSums[nodes[j]! * S + s]! - aliveSums[nodes[i]! * S + s]! >= 0.3 * (nodes[j]! - nodes[i]!),
    steps: (i, j, list, count, out) => {
      const a = nodes[i]! * S
      const b = nodes[j]! * S
      const o = Math.min(nodes[j]!, nodes[i]! + OPENING_CUES) * S
      for (let at = 0; at < count; at++) {
        const s = list[at]!
        out[s] = stepSums[b + s]! - stepSums[a + s]! + openSums[o + s]! - openSums[a + s]!
      }
    },
    kinds: (i, j, out) => {
      const a = nodes[i]! * KINDS
      const b = nodes[j]! * KINDS
      const time = seconds(i, j)
      const work = scoreOf(each => lengthFeatures(time, 'length', each))
      const stepless = scoreOf(each => lengthFeatures(time, 'stepless', each))
      const o = Math.min(nodes[j]!, nodes[i]! + OPENING_CUES) * KINDS
      for (let kind = 0; kind < KINDS; kind++) out[kind] = kindSums[b + kind]! - kindSums[a + kind]! + openKinds[o + kind]! - openKinds[a + kind]! + (kind < W ? work : stepless)
    },
    fit,
    fitRate,
    long: (i, j) => Math.min(LONG_MOST_S, seconds(i, j)) / LONG_UNIT_S,
    turn: i => turnOf[i]!,
    seam: i => speech.cues[nodes[i]!]?.first ?? false,
    move,
    change,
    begins: Float64Array.from(WORK_KINDS, kind => weights[`begins.${kind}`] ?? 0),
    toStepless: Float64Array.from([weights['to.none'] ?? 0, weights['to.steplessPlanTalk'] ?? 0, weights['to.steplessCleanUp'] ?? 0]),
    again: weights['stepless.again'] ?? 0,
  }
}
