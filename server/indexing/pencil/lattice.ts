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
  /** The step last worked on before the first node, as m; 0 for none. */
  startsOn: number
  /** Cue indices, ascending; the last is the number of cues. */
  nodes: number[]
  /** From which node a chapter that ends at node j may start (the earliest). */
  earliest(j: number): number
  /** False when no chapter may run from node i to node j (a fixed edge or a clip's edge lies between). */
  allowed(i: number, j: number): boolean
  /** When a stretch is fixed: its only state; else null. */
  only(i: number, j: number): { step: number | null, kind: number } | null
  /** Whether a step comes into question for a chapter from node i to j at all. */
  alive(i: number, j: number, s: number): boolean
  /** Scores of the first `count` steps of a list, for a chapter from node i to j, into out (by step). */
  steps(i: number, j: number, list: Int32Array, count: number, out: Float64Array): void
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
  /** From operation to operation on the same step: W × W; the diagonal is going on with the same in a new stretch. */
  change: Float64Array
  /** First operation on another step: W. */
  begins: Float64Array
  /** To the stepless kinds (3), and from one of them to another. */
  toStepless: Float64Array
  again: number
}

const NONE = -Infinity

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

/** The scores of one chapter after another, in buffers that are used again. */
export class Chapters {
  /** Steps that come into question for the chapter last weighed, and how many. */
  readonly alive: Int32Array
  count = 0
  readonly steps: Float64Array
  readonly kinds = new Float64Array(KINDS)
  /** Operation scores of step s stand at s × W. */
  long = 0
  only: { step: number | null, kind: number } | null = null

  constructor(private readonly lattice: Lattice) {
    this.steps = new Float64Array(lattice.S)
    this.alive = new Int32Array(lattice.S)
  }

  weigh(i: number, j: number): void {
    const { lattice } = this
    lattice.kinds(i, j, this.kinds)
    this.only = lattice.only(i, j)
    this.count = 0
    if (this.only) {
      if (this.only.step !== null) this.alive[this.count++] = this.only.step
    }
    else for (let s = 0; s < lattice.S; s++) if (lattice.alive(i, j, s)) this.alive[this.count++] = s
    lattice.steps(i, j, this.alive, this.count, this.steps)
    this.long = lattice.long(i, j)
  }

  /** Score of the chapter last weighed as operation `kind` on step s. */
  work(s: number, kind: number): number {
    if (this.only && this.only.kind !== kind) return NONE
    const at = s * W + kind
    return this.steps[s]! + this.kinds[kind]! + this.lattice.fit[at]! + this.lattice.fitRate[at]! * this.long
  }

  /** Score of it as a kind without a step. */
  stepless(kind: number): number {
    if (this.only && (this.only.step !== null || this.only.kind !== kind)) return NONE
    return this.kinds[kind]!
  }
}

/** Log of a sum that is added to one term at a time, for every state at once. */
class Sums {
  readonly max: Float64Array
  readonly sum: Float64Array
  constructor(size: number) {
    this.max = new Float64Array(size).fill(NONE)
    this.sum = new Float64Array(size)
  }

  put(at: number, value: number): void {
    const top = this.max[at]!
    if (value > top) {
      this.sum[at] = top === NONE ? 1 : top - value > -30 ? this.sum[at]! * Math.exp(top - value) + 1 : 1
      this.max[at] = value
    }
    else if (value - top > -30) this.sum[at]! += Math.exp(value - top)
  }

  into(out: Float64Array): void {
    let best = NONE
    for (let at = 0; at < out.length; at++) {
      const top = this.max[at]!
      const value = top === NONE ? NONE : top + Math.log(this.sum[at]!)
      out[at] = value
      if (value > best) best = value
    }
    // What is so far behind the best never counts again.
    for (let at = 0; at < out.length; at++) if (out[at]! < best - BEHIND) out[at] = NONE
  }
}

const BEHIND = 24

const exponentials = new WeakMap<Float64Array, Float64Array>()

/** The exponentials of a table of scores, kept with it. */
function waysOf(change: Float64Array): Float64Array {
  const known = exponentials.get(change)
  if (known) return known
  const ways = change.map(value => Math.exp(value))
  exponentials.set(change, ways)
  return ways
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
  const shares = new Float64Array(W)
  const unturned = Math.exp(-turn)
  const ways = waysOf(change)
  const live: number[] = []
  for (let m = 0; m <= S; m++) if (all[m]! !== NONE) live.push(m)
  for (let s = 0; s < S; s++) {
    const m = s + 1
    for (let n = 0; n < live.length; n++) buffer[n] = live[n] === m ? NONE : all[live[n]!]! + move[live[n]! * S + s]!
    const other = logSumOf(buffer, 0, live.length, 1)
    const resumed = chatted[m]! + move[m * S + s]!
    // Changes of operation are summed as shares of the likeliest: a matrix product, no logarithms.
    const top = worked[m]!
    if (top !== NONE) for (let before = 0; before < W; before++) shares[before] = Math.exp(ended[m * KINDS + before]! - top)
    for (let kind = 0; kind < W; kind++) {
      let score = logSum(other + begins[kind]!, resumed)
      if (top !== NONE) {
        let sum = 0
        for (let before = 0; before < W; before++) sum += shares[before]! * (before === kind && seam ? unturned : ways[before * W + kind]!)
        score = logSum(score, top + Math.log(sum))
      }
      out[m * KINDS + kind] = score + turn
    }
  }
  for (let m = 0; m <= S; m++) {
    for (let kind = W; kind < KINDS; kind++) {
      if (all[m] === NONE) continue
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
  const { S, startsOn, move, begins, toStepless } = lattice
  for (let s = 0; s < S; s++) {
    // What was under way before goes on for nothing.
    const same = s + 1 === startsOn
    for (let kind = 0; kind < W; kind++) out[(s + 1) * KINDS + kind] = same ? 0 : move[startsOn * S + s]! + begins[kind]!
  }
  for (let kind = W; kind < KINDS; kind++) out[startsOn * KINDS + kind] = toStepless[kind - W]!
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
    const sums = new Sums(N)
    for (let i = lattice.earliest(j); i < j; i++) {
      if (!lattice.allowed(i, j)) continue
      const from = entered[i]!
      chapters.weigh(i, j)
      for (let n = 0; n < chapters.count; n++) {
        const s = chapters.alive[n]!
        for (let kind = 0, at = (s + 1) * KINDS; kind < W; kind++, at++) if (from[at]! !== NONE) sums.put(at, from[at]! + chapters.work(s, kind))
      }
      for (let kind = W; kind < KINDS; kind++) {
        const score = chapters.stepless(kind)
        if (score !== NONE) for (let m = 0, at = kind; m <= S; m++, at += KINDS) if (from[at]! !== NONE) sums.put(at, from[at]! + score)
      }
    }
    const out = ended[j]!
    sums.into(out)
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
  const shares = new Float64Array(W)
  const unturned = Math.exp(-turn)
  const ways = waysOf(change)
  const live: number[] = []
  for (let s = 0; s < S; s++) if (begun[s]! !== NONE) live.push(s)
  for (let m = 0; m <= S; m++) {
    for (let n = 0; n < live.length; n++) others[n] = live[n]! + 1 === m ? NONE : begun[live[n]!]! + move[m * S + live[n]!]!
    const away = logSumOf(others, 0, live.length, 1)
    if (m) {
      const top = plain[m - 1]!
      if (top !== NONE) for (let next = 0; next < W; next++) shares[next] = Math.exp(following[m * KINDS + next]! - top)
      const elsewhere = logSum(away, stepless[m]!)
      for (let kind = 0; kind < W; kind++) {
        let score = elsewhere
        if (top !== NONE) {
          let sum = 0
          for (let next = 0; next < W; next++) sum += shares[next]! * (next === kind && seam ? unturned : ways[kind * W + next]!)
          score = logSum(score, top + Math.log(sum))
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
    const sums = new Sums(N)
    for (let j = i + 1; j <= latest[i]!; j++) {
      if (lattice.earliest(j) > i || !lattice.allowed(i, j)) continue
      const after = afterEnd[j]!
      chapters.weigh(i, j)
      for (let n = 0; n < chapters.count; n++) {
        const s = chapters.alive[n]!
        for (let kind = 0, at = (s + 1) * KINDS; kind < W; kind++, at++) if (after[at]! !== NONE) sums.put(at, after[at]! + chapters.work(s, kind))
      }
      for (let kind = W; kind < KINDS; kind++) {
        const score = chapters.stepless(kind)
        if (score !== NONE) for (let m = 0, at = kind; m <= S; m++, at += KINDS) if (after[at]! !== NONE) sums.put(at, after[at]! + score)
      }
    }
    const out = afterEnter[i]!
    sums.into(out)
    if (i > 0) leave(lattice, i, out, afterEnd[i]!)
  }
  return { afterEnd, afterEnter }
}
