import { backward, Chapters, forward, KINDS, type Lattice, W } from './lattice'

/** How likely each step and kind is at each cue, and a new chapter at each node, over all ways to tell the session. */
export interface Marginals {
  /** cue × (S + 1): steps, then none. */
  steps: Float64Array
  /** cue × KINDS */
  kinds: Float64Array
  /** node */
  turns: Float64Array
}

const LEAST = -12

export function marginalsOf(lattice: Lattice, cues: number): Marginals {
  const { S, nodes } = lattice
  const { logZ, entered } = forward(lattice)
  const { afterEnd, afterEnter } = backward(lattice)
  const width = S + 1
  const steps = new Float64Array((cues + 1) * width)
  const kinds = new Float64Array((cues + 1) * KINDS)
  const chapters = new Chapters(lattice)
  for (let j = 1; j < nodes.length; j++) {
    const to = nodes[j]!
    const b = afterEnd[j]!
    for (let i = lattice.earliest(j); i < j; i++) {
      if (!lattice.allowed(i, j)) continue
      const a = entered[i]!
      const from = nodes[i]!
      chapters.weigh(i, j)
      const put = (s: number, kind: number, p: number) => {
        steps[from * width + s]! += p
        steps[to * width + s]! -= p
        kinds[from * KINDS + kind]! += p
        kinds[to * KINDS + kind]! -= p
      }
      for (let n = 0; n < chapters.count; n++) {
        const s = chapters.alive[n]!
        for (let kind = 0, at = (s + 1) * KINDS; kind < W; kind++, at++) {
          const outer = a[at]! + b[at]! - logZ
          if (outer === -Infinity) continue
          const log = outer + chapters.work(s, kind)
          if (log > LEAST) put(s, kind, Math.exp(log))
        }
      }
      for (let kind = W; kind < KINDS; kind++) {
        const score = chapters.stepless(kind) - logZ
        for (let m = 0, at = kind; m <= S; m++, at += KINDS) {
          const log = a[at]! + score + b[at]!
          if (log > LEAST) put(S, kind, Math.exp(log))
        }
      }
    }
  }
  for (let cue = 1; cue <= cues; cue++) {
    for (let s = 0; s < width; s++) steps[cue * width + s]! += steps[(cue - 1) * width + s]!
    for (let kind = 0; kind < KINDS; kind++) kinds[cue * KINDS + kind]! += kinds[(cue - 1) * KINDS + kind]!
  }
  const turns = new Float64Array(nodes.length)
  for (let i = 1; i < nodes.length - 1; i++) {
    let p = 0
    const enter = entered[i]!
    const after = afterEnter[i]!
    for (let at = 0; at < enter.length; at++) {
      const log = enter[at]! + after[at]! - logZ
      if (log > LEAST) p += Math.exp(log)
    }
    turns[i] = p
  }
  return { steps, kinds, turns }
}

export interface Decoded { from: number, to: number, step: number | null, kind: number, /** Mean likelihood of the step over the chapter. */ confidence: number }

/**
 * The telling with the most time expected right: every second counts what its step and its operation are likely
 * to be, every turn costs unless a chapter is likely to start there (a minimum Bayes risk decoding).
 */
export function decode(lattice: Lattice, marginals: Marginals, seconds: Float64Array, options: { operation: number, turn: number, bar: number }): Decoded[] {
  const { S, nodes } = lattice
  const width = S + 1
  const n = seconds.length
  const stepTime = new Float64Array((n + 1) * width)
  const kindTime = new Float64Array((n + 1) * KINDS)
  for (let cue = 0; cue < n; cue++) {
    for (let s = 0; s < width; s++) stepTime[(cue + 1) * width + s] = stepTime[cue * width + s]! + marginals.steps[cue * width + s]! * seconds[cue]!
    for (let kind = 0; kind < KINDS; kind++) kindTime[(cue + 1) * KINDS + kind] = kindTime[cue * KINDS + kind]! + marginals.kinds[cue * KINDS + kind]! * seconds[cue]!
  }
  const best = new Float64Array(nodes.length).fill(-Infinity)
  const back: ({ i: number, step: number | null, kind: number } | undefined)[] = []
  best[0] = 0
  for (let j = 1; j < nodes.length; j++) {
    const to = nodes[j]!
    for (let i = lattice.earliest(j); i < j; i++) {
      if (!lattice.allowed(i, j) || best[i] === -Infinity) continue
      const from = nodes[i]!
      const only = lattice.only(i, j)
      let choice: { step: number | null, kind: number, gain: number }
      if (only) choice = { ...only, gain: 1e6 }
      else {
        let step = 0
        for (let s = 1; s < S; s++) if (stepTime[to * width + s]! - stepTime[from * width + s]! > stepTime[to * width + step]! - stepTime[from * width + step]!) step = s
        const gained = (at: number) => stepTime[to * width + at]! - stepTime[from * width + at]!
        const kindGained = (kind: number) => kindTime[to * KINDS + kind]! - kindTime[from * KINDS + kind]!
        let kind = 0
        for (let k = 1; k < W; k++) if (kindGained(k) > kindGained(kind)) kind = k
        let stepless: number = W
        for (let k = W + 1; k < KINDS; k++) if (kindGained(k) > kindGained(stepless)) stepless = k
        const work = S ? gained(step) + options.operation * kindGained(kind) : -Infinity
        const none = gained(S) + options.operation * kindGained(stepless)
        choice = work > none ? { step, kind, gain: work } : { step: null, kind: stepless, gain: none }
      }
      const value = best[i]! + choice.gain + (i ? options.turn * (marginals.turns[i]! - options.bar) : 0)
      if (value > best[j]!) {
        best[j] = value
        back[j] = { i, step: choice.step, kind: choice.kind }
      }
    }
  }
  const chapters: Decoded[] = []
  for (let j = nodes.length - 1; j > 0;) {
    const { i, step, kind } = back[j]!
    const from = nodes[i]!
    const to = nodes[j]!
    let time = 0
    for (let cue = from; cue < to; cue++) time += seconds[cue]!
    const at = step ?? S
    chapters.unshift({ from, to, step, kind, confidence: Math.min(1, Math.max(0, (stepTime[to * width + at]! - stepTime[from * width + at]!) / Math.max(time, 1e-9))) })
    j = i
  }
  return chapters
}
