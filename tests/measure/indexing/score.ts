import type { Operation } from '#shared/types/trade'
import type { Truth } from './load'

export interface ProposedChapter { startMs: number, endMs: number, step: number | null, operation: Operation }
export interface Tally {
  onStep: number
  onStepOk: number
  onOperation: number
  onOperationOk: number
  noneRight: number
  noneWrong: number
  noneMissed: number
  windows: number
  windowsWrong: number
}

const STEP_MS = 500
const at = <Of extends { startMs: number, endMs: number }>(chapters: Of[], ms: number) => chapters.find(chapter => ms >= chapter.startMs && ms < chapter.endMs)

/** Counts every half second: right step, right operation, none; and WindowDiff (Pevzner & Hearst 2002) of the edges. */
export function tallyChapters(truth: Truth, got: ProposedChapter[]): Tally {
  const tally: Tally = { onStep: 0, onStepOk: 0, onOperation: 0, onOperationOk: 0, noneRight: 0, noneWrong: 0, noneMissed: 0, windows: 0, windowsWrong: 0 }
  const reference: number[] = []
  const proposed: number[] = []
  for (let ms = 0; ms < truth.durationMs; ms += STEP_MS) {
    const a = at(truth.chapters, ms)
    const b = at(got, ms)
    if (a?.step != null) {
      tally.onStep++
      if (b?.step === a.step) tally.onStepOk++
    }
    if (a && a.operation !== 'none') {
      tally.onOperation++
      if (b?.operation === a.operation) tally.onOperationOk++
    }
    const none = a?.step == null
    const said = b?.step == null
    if (none && said) tally.noneRight++
    else if (said) tally.noneWrong++
    else if (none) tally.noneMissed++
    reference.push(a ? truth.chapters.indexOf(a) : -1)
    proposed.push(b ? got.indexOf(b) : -1)
  }
  const k = halfMeanSegment(reference.length, truth.chapters.length)
  const { windows, wrong } = windowDiffCounts(cutsOf(reference), cutsOf(proposed), k)
  return { ...tally, windows, windowsWrong: wrong }
}

const cutsOf = (segments: number[]) => segments.map((segment, i) => i && segment !== segments[i - 1] ? 1 : 0)
export const halfMeanSegment = (length: number, segments: number) => Math.max(1, Math.floor(length / segments / 2 + 0.5))

/** In how many windows of k places reference and proposal have different numbers of edges. */
export function windowDiffCounts(reference: number[], proposed: number[], k: number): { windows: number, wrong: number } {
  let wrong = 0
  let windows = 0
  for (let i = 0; i + k < reference.length; i++) {
    let r = 0
    let p = 0
    for (let j = i + 1; j <= i + k; j++) {
      r += reference[j]!
      p += proposed[j]!
    }
    if (r !== p) wrong++
    windows++
  }
  return { windows, wrong }
}

/** Share of windows of k places whose two ends are judged wrongly to lie in one segment or in two (Beeferman, Berger & Lafferty 1999). */
export function pk(reference: number[], proposed: number[], k: number): number {
  let wrong = 0
  let windows = 0
  for (let i = 0; i + k < reference.length; i++) {
    const any = (cuts: number[]) => cuts.slice(i + 1, i + k + 1).some(cut => cut)
    if (any(reference) !== any(proposed)) wrong++
    windows++
  }
  return windows ? wrong / windows : 0
}

export interface Figures { stepTime: number, operationTime: number, noneF1: number, windowDiff: number }
export function figuresOf(tallies: Tally[]): Figures {
  const sum = (of: (tally: Tally) => number) => tallies.reduce((total, tally) => total + of(tally), 0)
  const share = (a: number, b: number) => b ? a / b : 0
  return {
    stepTime: share(sum(t => t.onStepOk), sum(t => t.onStep)),
    operationTime: share(sum(t => t.onOperationOk), sum(t => t.onOperation)),
    noneF1: share(2 * sum(t => t.noneRight), 2 * sum(t => t.noneRight) + sum(t => t.noneWrong) + sum(t => t.noneMissed)),
    windowDiff: share(sum(t => t.windowsWrong), sum(t => t.windows)),
  }
}
