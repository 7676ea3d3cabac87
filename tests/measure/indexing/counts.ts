import { backward, Chapters, forward, KINDS, type Lattice, W } from '#server/indexing/pencil/lattice'
import { changeFeatures, kindFeatures, latticeOf, lengthFeatures, LONG_MOST_S, LONG_UNIT_S, moveFeatures, OPENING_CUES, openingFeatures } from '#server/indexing/pencil/latticeOf'
import type { Material } from '#server/indexing/pencil/material'
import type { Weights } from '#server/indexing/pencil/model'
import { STEP_FEATURES } from '#server/indexing/pencil/stepEvidence'
import { TURN_FEATURES } from '#server/indexing/pencil/turns'
import { WORK_KINDS } from '#server/indexing/pencil/types'

export type Counts = Record<string, number>

/** A true chapter in terms of nodes and states. */
export interface TrueChapter { i: number, j: number, step: number | null, kind: number }

const add = (counts: Counts, by: number) => (name: string, value: number) => { counts[name] = (counts[name] ?? 0) + by * value }

/** The features of the true chapters, summed. */
export function trueCounts(material: Material, chapters: TrueChapter[]): Counts {
  const counts: Counts = {}
  let memory = 0
  let before: TrueChapter | null = null
  for (const chapter of chapters) {
    const from = material.nodes[chapter.i]!
    const to = material.nodes[chapter.j]!
    chapterFeatures(material, from, to, chapter.step, chapter.kind, add(counts, 1))
    if (before) turnFeatures(material, from, add(counts, 1))
    if (chapter.step === null) {
      counts[STEPLESS_TO[chapter.kind - W]!] = (counts[STEPLESS_TO[chapter.kind - W]!] ?? 0) + 1
      if (before?.step === null && before) counts['stepless.again'] = (counts['stepless.again'] ?? 0) + 1
    }
    else if (before && before.step === chapter.step) changeFeatures(before.kind, chapter.kind, add(counts, 1))
    else {
      moveFeatures(material, memory, chapter.step, add(counts, 1))
      if (memory !== chapter.step + 1) add(counts, 1)(`begins.${WORK_KINDS[chapter.kind]!}`, 1)
    }
    if (chapter.step !== null) memory = chapter.step + 1
    before = chapter
  }
  return counts
}

const STEPLESS_TO = ['to.none', 'to.steplessPlanTalk', 'to.steplessCleanUp']

function turnFeatures(material: Material, cue: number, each: (name: string, value: number) => void): void {
  TURN_FEATURES.forEach((name, k) => {
    const value = material.turns[cue * TURN_FEATURES.length + k]!
    if (value) each(`turn.${name}`, value)
  })
}

function chapterFeatures(material: Material, from: number, to: number, step: number | null, kind: number, each: (name: string, value: number) => void): void {
  const { S } = material
  let seconds = 0
  for (let cue = from; cue < to; cue++) {
    seconds += material.seconds[cue]!
    kindFeatures(material, cue, kind, each)
    if (step !== null) STEP_FEATURES.forEach((name, k) => each(`step.${name}`, material.steps[(cue * S + step) * STEP_FEATURES.length + k]!))
  }
  lengthFeatures(seconds, step === null ? 'stepless' : 'length', each)
  for (let cue = from; cue < Math.min(to, from + OPENING_CUES); cue++) openingFeatures(material, cue, kind, each)
  if (step === null) return
  for (let cue = from; cue < Math.min(to, from + OPENING_CUES); cue++) {
    each('opening.words', material.openWords[cue * S + step]!)
    each('opening.topic', material.openTopic[cue * S + step]!)
  }
  fitFeatures(material, step, kind, 1, Math.min(LONG_MOST_S, seconds) / LONG_UNIT_S, each)
}

function fitFeatures(material: Material, step: number, kind: number, times: number, long: number, each: (name: string, value: number) => void): void {
  const title = material.index.operationsInTitle[step * W + kind]!
  const text = material.index.operationsInText[step * W + kind]!
  each('kind.inTitle', title * times)
  each('kind.inText', text * times)
  if (!text) each('kind.notInText', times)
  each('kind.inTitleRate', title * long)
  each('kind.inTextRate', text * long)
}

/** What the model expects of all features under its weights, and the log of the sum over all ways (logZ). */
export function expectedCounts(material: Material, weights: Weights, loss?: (lattice: Lattice) => void): { logZ: number, counts: Counts } {
  const lattice = latticeOf(material, weights)
  loss?.(lattice)
  const { logZ, ended, entered } = forward(lattice)
  const { afterEnd, afterEnter } = backward(lattice)
  const { S, nodes } = lattice
  const n = material.speech.cues.length
  const counts: Counts = {}
  const each = add(counts, 1)
  const chapters = new Chapters(lattice)
  const stepOver = new Float64Array((n + 1) * S)
  const kindOver = new Float64Array((n + 1) * KINDS)
  const fit = new Float64Array(S * W)
  const fitLong = new Float64Array(S * W)
  for (let j = 1; j < nodes.length; j++) {
    for (let i = lattice.earliest(j); i < j; i++) {
      if (!lattice.allowed(i, j)) continue
      const a = entered[i]!
      const b = afterEnd[j]!
      const from = nodes[i]!
      const to = nodes[j]!
      const long = lattice.long(i, j)
      let work = 0
      let stepless = 0
      const byKind = new Float64Array(KINDS)
      const mine = new Float64Array(S)
      chapters.weigh(i, j)
      for (let n = 0; n < chapters.count; n++) {
        const s = chapters.alive[n]!
        for (let kind = 0, at = (s + 1) * KINDS; kind < W; kind++, at++) {
          const log = a[at]! + chapters.work(s, kind) + b[at]! - logZ
          if (!(log > -16)) continue
          const p = Math.exp(log)
          work += p
          mine[s]! += p
          byKind[kind]! += p
          kindOver[from * KINDS + kind]! += p
          kindOver[to * KINDS + kind]! -= p
          fit[s * W + kind]! += p
          fitLong[s * W + kind]! += p * long
        }
      }
      for (let kind = W; kind < KINDS; kind++) {
        const score = chapters.stepless(kind)
        let p = 0
        for (let m = 0; m <= S; m++) {
          const at = m * KINDS + kind
          const log = a[at]! + score + b[at]! - logZ
          if (log > -16) p += Math.exp(log)
        }
        stepless += p
        byKind[kind]! += p
        kindOver[from * KINDS + kind]! += p
        kindOver[to * KINDS + kind]! -= p
      }
      if (work < 1e-7 && stepless < 1e-7) continue
      for (let s = 0; s < S; s++) {
        const p = mine[s]!
        if (p < 1e-7) continue
        stepOver[from * S + s]! += p
        stepOver[to * S + s]! -= p
        for (let cue = from; cue < Math.min(to, from + OPENING_CUES); cue++) {
          each('opening.words', p * material.openWords[cue * S + s]!)
          each('opening.topic', p * material.openTopic[cue * S + s]!)
        }
      }
      for (let cue = from; cue < Math.min(to, from + OPENING_CUES); cue++) {
        for (let kind = 0; kind < KINDS; kind++) if (byKind[kind]! > 1e-7) openingFeatures(material, cue, kind, add(counts, byKind[kind]!))
      }
      let seconds = 0
      for (let cue = from; cue < to; cue++) seconds += material.seconds[cue]!
      lengthFeatures(seconds, 'length', add(counts, work))
      lengthFeatures(seconds, 'stepless', add(counts, stepless))
    }
  }
  for (let s = 0; s < S; s++) for (let kind = 0; kind < W; kind++) fitFeatures(material, s, kind, fit[s * W + kind]!, fitLong[s * W + kind]!, each)
  const K = STEP_FEATURES.length
  const stepNow = new Float64Array(S)
  const kindNow = new Float64Array(KINDS)
  for (let cue = 0; cue < n; cue++) {
    for (let s = 0; s < S; s++) {
      stepNow[s]! += stepOver[cue * S + s]!
      if (stepNow[s]! > 1e-6) for (let k = 0; k < K; k++) each(`step.${STEP_FEATURES[k]!}`, stepNow[s]! * material.steps[(cue * S + s) * K + k]!)
    }
    for (let kind = 0; kind < KINDS; kind++) {
      kindNow[kind]! += kindOver[cue * KINDS + kind]!
      if (kindNow[kind]! > 1e-6) kindFeatures(material, cue, kind, add(counts, kindNow[kind]!))
    }
  }
  const turns = new TurnCounts(material, lattice)
  for (let i = 0; i < nodes.length - 1; i++) turns.node(i, i ? ended[i]! : null, afterEnter[i]!, logZ)
  turns.into(counts)
  return { logZ, counts }
}

/** What is expected of moves from chapter to chapter, gathered over all nodes before features are read off. */
class TurnCounts {
  private readonly moves: Float64Array
  private readonly changes = new Float64Array(W * W)
  private readonly first = new Float64Array(W)
  private readonly stepless = new Float64Array(3)
  private again = 0
  private readonly boundary: Float64Array

  constructor(private readonly material: Material, private readonly lattice: Lattice) {
    this.moves = new Float64Array((lattice.S + 1) * lattice.S)
    this.boundary = new Float64Array(lattice.nodes.length)
  }

  node(i: number, ended: Float64Array | null, following: Float64Array, logZ: number): void {
    const { S, move, begins, change, toStepless, again } = this.lattice
    const turn = (i ? this.lattice.turn(i) : 0) - logZ
    let boundary = 0
    const begun = new Float64Array(S)
    const buffer = new Float64Array(W)
    const arrived = new Float64Array(S)
    for (let s = 0; s < S; s++) {
      for (let kind = 0; kind < W; kind++) buffer[kind] = following[(s + 1) * KINDS + kind]! + begins[kind]!
      begun[s] = logs(buffer, 0, W)
    }
    const moved = (m: number, s: number, from: number) => {
      const p = Math.exp(from + move[m * S + s]! + begun[s]! + turn)
      this.moves[m * S + s]! += p
      arrived[s]! += p
    }
    if (!ended) {
      for (let s = 0; s < S; s++) moved(0, s, 0)
      for (let kind = 0; kind < 3; kind++) this.stepless[kind]! += Math.exp(toStepless[kind]! + following[W + kind]! + turn)
    }
    else {
      for (let m = 0; m <= S; m++) {
        const all = logs(ended, m * KINDS, KINDS)
        if (all === -Infinity) continue
        for (let s = 0; s < S; s++) if (s + 1 !== m) moved(m, s, all)
        const work = m ? logs(ended, m * KINDS, W) : -Infinity
        if (m) {
          const plain = logs(following, m * KINDS, W)
          const resumed = Math.exp(logs(ended, m * KINDS + W, 3) + move[m * S + m - 1]! + plain + turn)
          this.moves[m * S + m - 1]! += resumed
          boundary += resumed
          if (work + plain + turn > -18) {
            for (let before = 0; before < W; before++) {
              const e = ended[m * KINDS + before]! + turn
              for (let kind = 0; kind < W; kind++) {
                if (kind === before) continue
                const p = Math.exp(e + change[before * W + kind]! + following[m * KINDS + kind]!)
                this.changes[before * W + kind]! += p
                boundary += p
              }
            }
          }
        }
        for (let kind = W; kind < KINDS; kind++) {
          const to = toStepless[kind - W]! + following[m * KINDS + kind]! + turn
          const fromWork = Math.exp(work + to)
          let fromOther = 0
          for (let before = W; before < KINDS; before++) if (before !== kind) fromOther += Math.exp(ended[m * KINDS + before]! + again + to)
          boundary += fromWork + fromOther
          this.stepless[kind - W]! += fromWork + fromOther
          this.again += fromOther
        }
      }
    }
    for (let s = 0; s < S; s++) {
      if (arrived[s]! < 1e-9) continue
      boundary += arrived[s]!
      for (let kind = 0; kind < W; kind++) this.first[kind]! += arrived[s]! * Math.exp(begins[kind]! + following[(s + 1) * KINDS + kind]! - begun[s]!)
    }
    if (i) this.boundary[i] = boundary
  }

  into(counts: Counts): void {
    const { S, nodes } = this.lattice
    for (let m = 0; m <= S; m++) for (let s = 0; s < S; s++) if (this.moves[m * S + s]! > 1e-9) moveFeatures(this.material, m, s, add(counts, this.moves[m * S + s]!))
    for (let from = 0; from < W; from++) for (let to = 0; to < W; to++) if (this.changes[from * W + to]! > 1e-9) changeFeatures(from, to, add(counts, this.changes[from * W + to]!))
    WORK_KINDS.forEach((kind, k) => add(counts, this.first[k]!)(`begins.${kind}`, 1))
    STEPLESS_TO.forEach((name, k) => add(counts, this.stepless[k]!)(name, 1))
    add(counts, this.again)('stepless.again', 1)
    for (let i = 1; i < nodes.length - 1; i++) if (this.boundary[i]! > 1e-9) turnFeatures(this.material, nodes[i]!, add(counts, this.boundary[i]!))
  }
}

function logs(values: Float64Array, from: number, count: number): number {
  let max = -Infinity
  for (let i = 0; i < count; i++) if (values[from + i]! > max) max = values[from + i]!
  if (max === -Infinity) return max
  let sum = 0
  for (let i = 0; i < count; i++) sum += Math.exp(values[from + i]! - max)
  return max + Math.log(sum)
}
