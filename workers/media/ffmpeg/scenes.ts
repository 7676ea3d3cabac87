/*
 * Abrupt changes of the picture, from colour histograms (8 × 8 × 8 bins of RGB): cheap, and blind to what moves within
 * the picture, which is what a bench camera sees most.
 */

/** Share of the pixels in each of 512 colour bins. */
export type Histogram = Float32Array

/** A histogram and when its picture is shown. */
export interface Sample { timeMs: number, histogram: Histogram }

/*
 * Thresholds measured on consecutive 64 × 36 pictures of five kinds of footage: test patterns with noise (9 cuts), drawn
 * shop scenes of one palette from a shaking camera (7 cuts, one of them a change of angle only), and without cuts whip
 * pans, swinging exposure, and something passing close to the lens. Cuts: difference ≥ 0.36 and ≥ 8.6 times their
 * surroundings. Everything else: difference ≤ 0.20, or (exposure, up to 0.43) ≤ 2.8 times. Keyframes a second or two
 * apart do not tell the kinds apart (cuts from 0.32, pans to 0.55, exposure to 0.92), so they only raise suspicion.
 */

/** Two pictures a moment apart: beyond this they may belong to different scenes. */
export const CUT = 0.28
/** A cut also stands out from its surroundings by this factor: in a whip pan every picture differs from the last. */
const STANDS_OUT = 5
const SURROUNDINGS = 8
/** Two keyframes differ by movement alone; from here on it is worth a look at what lies between. */
export const WORTH_A_LOOK = 0.25

/** @param rgb packed 8-bit RGB */
export function histogramOf(rgb: Uint8Array): Histogram {
  const bins = new Float32Array(512)
  const pixels = Math.floor(rgb.length / 3)
  for (let i = 0; i + 2 < rgb.length; i += 3) {
    bins[(rgb[i]! >> 5) << 6 | (rgb[i + 1]! >> 5) << 3 | rgb[i + 2]! >> 5]!++
  }
  for (let i = 0; i < 512; i++) bins[i]! /= pixels
  return bins
}

/** Share of the picture that changed colour: 0 the same, 1 nothing in common. */
export function difference(a: Histogram, b: Histogram): number {
  let sum = 0
  for (let i = 0; i < 512; i++) sum += Math.abs(a[i]! - b[i]!)
  return sum / 2
}

/** Watches consecutive pictures go by and reports where the scene changes, at the first picture of the new one. */
export class CutFinder {
  private last: Histogram | null = null
  private readonly timesMs: number[] = []
  private readonly differences: number[] = []

  take(timeMs: number, histogram: Histogram) {
    if (this.last) {
      this.timesMs.push(timeMs)
      this.differences.push(difference(this.last, histogram))
    }
    this.last = histogram
  }

  finish(): number[] {
    return this.timesMs.filter((_, i) => this.isCut(i))
  }

  private isCut(i: number): boolean {
    const here = this.differences[i]!
    if (here < CUT) return false
    const around = this.differences.slice(Math.max(0, i - SURROUNDINGS), i + SURROUNDINGS + 1).sort((a, b) => a - b)
    // Nothing around to compare with: the threshold alone decides.
    return around.length < 5 || here > STANDS_OUT * around[around.length >> 1]!
  }
}

/** A stretch between two keyframes in which the scene seems to change. */
export interface Suspect { fromMs: number, toMs: number, difference: number }

/** Compares each keyframe with the one before. */
export class SuspectFinder {
  readonly suspects: Suspect[] = []
  private last: Sample | null = null

  take(timeMs: number, histogram: Histogram) {
    if (this.last) {
      const found = difference(this.last.histogram, histogram)
      if (found >= WORTH_A_LOOK) this.suspects.push({ fromMs: this.last.timeMs, toMs: timeMs, difference: found })
    }
    this.last = { timeMs, histogram }
  }
}

/**
 * Chooses which suspects to look into: the strongest first, as long as the footage to decode stays within a share of
 * the clip. The plainest of the others are returned beside them, at the later keyframe.
 */
export function splitSuspects(suspects: readonly Suspect[], budgetMs: number): { look: Suspect[], unseenMs: number[] } {
  const look: Suspect[] = []
  const unseenMs: number[] = []
  let spent = 0
  for (const suspect of [...suspects].sort((a, b) => b.difference - a.difference)) {
    const length = suspect.toMs - suspect.fromMs
    if (spent + length <= budgetMs) {
      spent += length
      look.push(suspect)
    }
    else if (suspect.difference >= 1.5 * CUT) unseenMs.push(suspect.toMs)
  }
  return { look, unseenMs }
}
