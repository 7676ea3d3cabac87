import { WORK_KINDS } from './types'

export const W = WORK_KINDS.length
/** Kinds: 14 operations on a step, then none, plan-talk and clean-up without one. */
export const KINDS = W + 3

/**
 * A session as the model sees it: nodes are the places where a chapter may start (indices into the cues), and
 * scores for what a chapter between two nodes may be. `m` is the step last worked on, 0 for none yet, so that
 * work is taken up again after a chat; states are m × kind.
 */
export interface Lattice {
  /** Number of steps. */
  S: number
  /** Cue indices, ascending; the last is the number of cues. */
  nodes: number[]
  /** From which node a chapter that ends at node j may start (the earliest). */
  earliest(j: number): number
  /** False when no chapter may run from node i to node j (a fixed edge or a clip's edge lies between). */
  allowed(i: number, j: number): boolean
  /** When a stretch is fixed: its only state; else null. */
  only(i: number, j: number): { step: number | null, kind: number } | null
  /** Adds scores for every step, of a chapter from node i to j, into out (S). */
  steps(i: number, j: number, out: Float64Array): void
  /** The same for every kind, including length (KINDS). */
  kinds(i: number, j: number, out: Float64Array): void
  /** How well step and operation go together, at length `seconds` of the chapter: S × W, two tables. */
  fit: Float64Array
  fitRate: Float64Array
  /** How long the chapter is, in the unit of fitRate. */
  long(i: number, j: number): number
  /** Score of a chapter starting at node i. */
  turn(i: number): number
  /** True at a clip's first cue: the same work may go on. */
  seam(i: number): boolean
  /** From step m (0 = none yet) to step s: (S+1) × S. The diagonal is taking up again after a chat. */
  move: Float64Array
  /** From operation to operation on the same step: W × W, -Infinity on the diagonal. */
  change: Float64Array
  /** First operation on another step: W. */
  begins: Float64Array
  /** To the stepless kinds (3), and from one of them to another. */
  toStepless: Float64Array
  again: number
  /** Kinds that may be used at all without a step; the fixed ones are always. */
}

const NONE = -Infinity

/** For every node, the best (or summed) score of all ways to it, by state, and of starting a chapter there. */
interface Pass { at: Float64Array[], entering: Float64Array[] }

function states(lattice: Lattice): number { return (lattice.S + 1) * KINDS }

function logSum(a: number, b: number): number {
  if (a === NONE) return b
  if (b === NONE) return a
  return a > b ? a + Math.log1p(Math.exp(b - a)) : b + Math.log1p(Math.exp(a - b))
}

function logSumOf(values: Float64Array, from: number, count: number, stride: number): number {
  let max = NONE
  for (let i = 0, at = from; i < count; i++, at += stride) if (values[at]! > max) max = values[at]!
  if (max === NONE) return NONE
  let sum = 0
  for (let i = 0, at = from; i < count; i++, at += stride) sum += Math.exp(values[at]! - max)
  return max + Math.log(sum)
}

/** The score of one chapter in every state, into out; NONE where it may not be. */
export class Chapters {
  private readonly stepScores: Float64Array
  private readonly kindScores = new Float64Array(KINDS)
  constructor(private readonly lattice: Lattice) { this.stepScores = new Float64Array(lattice.S) }

  /** Calls `each(m, kind, score)` for all states that a chapter from i to j may have. m is 1-based for work; stepless kinds go with every m and are called with m = -1. */
  score(i: number, j: number, work: (s: number, kind: number, score: number) => void, stepless: (kind: number, score: number) => void): void {
    const { lattice, stepScores, kindScores } = this
    const { S } = lattice
    const only = lattice.only(i, j)
    stepScores.fill(0)
    kindScores.fill(0)
    lattice.steps(i, j, stepScores)
    lattice.kinds(i, j, kindScores)
    if (only) {
      if (only.step === null) stepless(only.kind, kindScores[only.kind]!)
      else work(only.step, only.kind, stepScores[only.step]! + kindScores[only.kind]!)
      return
    }
    const long = lattice.long(i, j)
    for (let s = 0; s < S; s++) {
      const base = stepScores[s]!
      for (let kind = 0; kind < W; kind++) work(s, kind, base + kindScores[kind]! + lattice.fit[s * W + kind]! + lattice.fitRate[s * W + kind]! * long)
    }
    for (let kind = W; kind < KINDS; kind++) stepless(kind, kindScores[kind]!)
  }
}

/** Scores of entering each state at node i, from the scores of having ended there; `sum` or best. */
function enter(lattice: Lattice, i: number, ended: Float64Array, out: Float64Array): void {
  const { S, move, change, begins, toStepless, again } = lattice
  out.fill(NONE)
  const turn = lattice.turn(i)
  const seam = lattice.seam(i)
  // All that ended on step m, work or not: what counts for going to another step.
  const all = new Float64Array(S + 1)
  const worked = new Float64Array(S + 1)
  const chatted = new Float64Array(S + 1)
  for (let m = 0; m <= S; m++) {
    worked[m] = m ? logSumOf(ended, m * KINDS, W, 1) : NONE
    chatted[m] = logSumOf(ended, m * KINDS + W, 3, 1)
    all[m] = logSum(worked[m]!, chatted[m]!)
  }
  const buffer = new Float64Array(S + 1)
  for (let s = 0; s < S; s++) {
    const m = s + 1
    for (let from = 0; from <= S; from++) buffer[from] = from === m ? NONE : all[from]! + move[from * S + s]!
    const other = logSumOf(buffer, 0, S + 1, 1)
    const resumed = chatted[m]! + move[m * S + s]!
    const any = worked[m]! !== NONE
    for (let kind = 0; kind < W; kind++) {
      let score = logSum(other + begins[kind]!, resumed)
      if (any) {
        for (let before = 0; before < W; before++) {
          const e = ended[m * KINDS + before]!
          if (e === NONE) continue
          if (before !== kind) score = logSum(score, e + change[before * W + kind]!)
          else if (seam) score = logSum(score, e - turn)
        }
      }
      out[m * KINDS + kind] = score + turn
    }
  }
  for (let m = 0; m <= S; m++) {
    for (let kind = W; kind < KINDS; kind++) {
      let score = worked[m]! + toStepless[kind - W]!
      for (let before = W; before < KINDS; before++) {
        const e = ended[m * KINDS + before]!
        if (e !== NONE) score = logSum(score, before === kind ? (seam ? e - turn : NONE) : e + again + toStepless[kind - W]!)
      }
      out[m * KINDS + kind] = score + turn
    }
  }
}

/** How a session may begin. */
function begin(lattice: Lattice, out: Float64Array): void {
  out.fill(NONE)
  const { S, move, begins, toStepless } = lattice
  for (let s = 0; s < S; s++) for (let kind = 0; kind < W; kind++) out[(s + 1) * KINDS + kind] = move[s]! + begins[kind]!
  for (let kind = W; kind < KINDS; kind++) out[kind] = toStepless[kind - W]!
}

/** Log of the sum over all ways to tell the session, and per node what ended and entered there. */
export function forward(lattice: Lattice): { logZ: number, ended: Float64Array[], entered: Float64Array[] } {
  const { nodes, S } = lattice
  const N = states(lattice)
  const ended: Float64Array[] = nodes.map(() => new Float64Array(N).fill(NONE))
  const entered: Float64Array[] = nodes.map(() => new Float64Array(N).fill(NONE))
  const chapters = new Chapters(lattice)
  begin(lattice, entered[0]!)
  for (let j = 1; j < nodes.length; j++) {
    const out = ended[j]!
    // Log-sum with a running maximum: first the largest, then the sum.
    const max = new Float64Array(N).fill(NONE)
    const sum = new Float64Array(N)
    const put = (at: number, value: number) => {
      if (value === NONE) return
      const top = max[at]!
      if (value > top) { sum[at] = top === NONE ? 1 : sum[at]! * Math.exp(top - value) + 1; max[at] = value }
      else if (value > top - 30) sum[at]! += Math.exp(value - top)
    }
    for (let i = lattice.earliest(j); i < j; i++) {
      if (!lattice.allowed(i, j)) continue
      const from = entered[i]!
      chapters.score(i, j,
        (s, kind, score) => { const at = (s + 1) * KINDS + kind; put(at, from[at]! + score) },
        (kind, score) => { for (let m = 0; m <= S; m++) { const at = m * KINDS + kind; put(at, from[at]! + score) } })
    }
    for (let at = 0; at < N; at++) out[at] = max[at] === NONE ? NONE : max[at]! + Math.log(sum[at]!)
    if (j < nodes.length - 1) enter(lattice, j, out, entered[j]!)
  }
  return { logZ: logSumOf(ended.at(-1)!, 0, N, 1), ended, entered }
}

/** The reverse of `enter`: from scores of what follows each state entered at i, to those of each state ended there. */
function leave(lattice: Lattice, i: number, following: Float64Array, out: Float64Array): void {
  const { S, move, change, begins, toStepless, again } = lattice
  out.fill(NONE)
  const turn = lattice.turn(i)
  const seam = lattice.seam(i)
  const begun = new Float64Array(S)
  const plain = new Float64Array(S)
  const buffer = new Float64Array(W)
  for (let s = 0; s < S; s++) {
    for (let kind = 0; kind < W; kind++) buffer[kind] = following[(s + 1) * KINDS + kind]! + begins[kind]!
    begun[s] = logSumOf(buffer, 0, W, 1)
    plain[s] = logSumOf(following, (s + 1) * KINDS, W, 1)
  }
  const stepless = new Float64Array(S + 1)
  const three = new Float64Array(3)
  for (let m = 0; m <= S; m++) {
    for (let kind = 0; kind < 3; kind++) three[kind] = following[m * KINDS + W + kind]! + toStepless[kind]!
    stepless[m] = logSumOf(three, 0, 3, 1)
  }
  const others = new Float64Array(S)
  for (let m = 0; m <= S; m++) {
    for (let s = 0; s < S; s++) others[s] = s + 1 === m ? NONE : begun[s]! + move[m * S + s]!
    const away = logSumOf(others, 0, S, 1)
    if (m) {
      for (let kind = 0; kind < W; kind++) {
        let score = logSum(away, stepless[m]!)
        for (let next = 0; next < W; next++) {
          const f = following[m * KINDS + next]!
          if (f === NONE) continue
          if (next !== kind) score = logSum(score, f + change[kind * W + next]!)
          else if (seam) score = logSum(score, f - turn)
        }
        out[m * KINDS + kind] = score + turn
      }
    }
    for (let kind = W; kind < KINDS; kind++) {
      let score = m ? logSum(away, plain[m - 1]! + move[m * S + m - 1]!) : away
      for (let next = W; next < KINDS; next++) {
        const f = following[m * KINDS + next]!
        if (f !== NONE) score = logSum(score, next === kind ? (seam ? f - turn : NONE) : f + again + toStepless[next - W]!)
      }
      out[m * KINDS + kind] = score + turn
    }
  }
}

/** What follows: per node the summed score of all ways on from having ended there, and from having entered there. */
export function backward(lattice: Lattice): { afterEnd: Float64Array[], afterEnter: Float64Array[] } {
  const { nodes, S } = lattice
  const N = states(lattice)
  const last = nodes.length - 1
  const afterEnd: Float64Array[] = nodes.map(() => new Float64Array(N).fill(NONE))
  const afterEnter: Float64Array[] = nodes.map(() => new Float64Array(N).fill(NONE))
  afterEnd[last]!.fill(0)
  const chapters = new Chapters(lattice)
  const latest: number[] = nodes.map(() => 0)
  for (let j = 1; j <= last; j++) for (let i = lattice.earliest(j); i < j; i++) latest[i] = Math.max(latest[i]!, j)
  for (let i = last - 1; i >= 0; i--) {
    const max = new Float64Array(N).fill(NONE)
    const sum = new Float64Array(N)
    const put = (at: number, value: number) => {
      if (value === NONE) return
      const top = max[at]!
      if (value > top) { sum[at] = top === NONE ? 1 : sum[at]! * Math.exp(top - value) + 1; max[at] = value }
      else if (value > top - 30) sum[at]! += Math.exp(value - top)
    }
    for (let j = i + 1; j <= latest[i]!; j++) {
      if (lattice.earliest(j) > i || !lattice.allowed(i, j)) continue
      const after = afterEnd[j]!
      chapters.score(i, j,
        (s, kind, score) => { const at = (s + 1) * KINDS + kind; put(at, after[at]! + score) },
        (kind, score) => { for (let m = 0; m <= S; m++) { const at = m * KINDS + kind; put(at, after[at]! + score) } })
    }
    const out = afterEnter[i]!
    for (let at = 0; at < N; at++) out[at] = max[at] === NONE ? NONE : max[at]! + Math.log(sum[at]!)
    if (i > 0) leave(lattice, i, out, afterEnd[i]!)
  }
  return { afterEnd, afterEnter }
}
