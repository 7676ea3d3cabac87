import { clamp } from './search'

/**
 * Loudness in layers, each half as fine as the one before. `high` is how loud it gets, `low` how quiet it
 * gets within about a second: talk is high with a low floor (words and gaps), a planer is high in both, a
 * silence low in both. Values 0–1.
 */
export interface SoundPyramid { perSecond: number, layers: SoundLayer[] }
export interface SoundLayer { high: Float32Array, low: Float32Array }

/** Loudness grows with about the 0.6th power of sound pressure (Stevens 1955, J. Acoust. Soc. Am. 27, 815). */
const LOUDNESS = Float32Array.from({ length: 256 }, (_, byte) => (byte / 255) ** 0.6)
/** How far round a sample its floor is sought, seconds: longer than a gap between syllables. */
const FLOOR_REACH_S = 0.45

/** @param peaks one byte per 1/perSecond s, 0 silent – 255 full scale. Linear time; 6 h take some 20 ms. */
export function buildPyramid(peaks: Uint8Array, perSecond: number): SoundPyramid {
  const high = new Float32Array(peaks.length)
  for (let index = 0; index < peaks.length; index++) high[index] = LOUDNESS[peaks[index]!]!
  const layers: SoundLayer[] = [{ high, low: slidingLeast(high, Math.max(1, Math.round(FLOOR_REACH_S * perSecond))) }]
  while (layers.at(-1)!.high.length > 2) layers.push(halve(layers.at(-1)!))
  return { perSecond, layers }
}

function halve(finer: SoundLayer): SoundLayer {
  const length = Math.ceil(finer.high.length / 2)
  const high = new Float32Array(length)
  const low = new Float32Array(length)
  for (let index = 0; index < length; index++) {
    const a = index * 2
    const b = Math.min(a + 1, finer.high.length - 1)
    // A mean of fourth powers: loud moments keep their weight without one knock standing for a whole minute.
    high[index] = ((finer.high[a]! ** 4 + finer.high[b]! ** 4) / 2) ** 0.25
    low[index] = (finer.low[a]! + finer.low[b]!) / 2
  }
  return { high, low }
}

/** Least value within `reach` of each place, by a queue of rising candidates. */
function slidingLeast(values: Float32Array, reach: number): Float32Array {
  const least = new Float32Array(values.length)
  const queue = new Int32Array(values.length)
  let head = 0
  let tail = 0
  for (let index = 0; index < values.length + reach; index++) {
    if (index < values.length) {
      while (tail > head && values[queue[tail - 1]!]! >= values[index]!) tail--
      queue[tail++] = index
    }
    const centre = index - reach
    if (centre < 0) continue
    while (queue[head]! < centre - reach) head++
    least[centre] = values[queue[head]!]!
  }
  return least
}

/** Loudness at a time of the clip, read between the samples of the layer for one knot every `knotMs`. */
export function soundAt(pyramid: SoundPyramid, clipMs: number, layer: number): { high: number, low: number } {
  const { high, low } = pyramid.layers[clamp(layer, 0, pyramid.layers.length - 1)]!
  if (high.length === 0) return { high: 0, low: 0 }
  const perMs = pyramid.perSecond / 1000 / 2 ** clamp(layer, 0, pyramid.layers.length - 1)
  const place = clamp(clipMs * perMs - 0.5, 0, high.length - 1)
  const index = Math.floor(place)
  const next = Math.min(index + 1, high.length - 1)
  const part = place - index
  return { high: high[index]! + (high[next]! - high[index]!) * part, low: low[index]! + (low[next]! - low[index]!) * part }
}

/** Layer and spacing for knots at least `leastPx` apart. Spacings double, so that knots keep their places while panning. */
export function knotSpacing(msPerPx: number, leastPx: number, perSecond: number): { knotMs: number, layer: number } {
  const sample = 1000 / perSecond
  const layer = Math.max(0, Math.ceil(Math.log2(msPerPx * leastPx / sample)))
  return { knotMs: sample * 2 ** layer, layer }
}

/** Springs a batten over the knots: each gives way to its neighbours by binomial weights (1 4 6 4 1). */
export function fairKnots(values: Float32Array): Float32Array {
  const last = values.length - 1
  const at = (index: number) => values[clamp(index, 0, last)]!
  return values.map((_, i) => (at(i - 2) + 4 * at(i - 1) + 6 * at(i) + 4 * at(i + 1) + at(i + 2)) / 16)
}

/**
 * Slopes (per knot) of a cubic through evenly spaced knots that never rises above or falls below them
 * (Fritsch & Butland 1984, SIAM J. Sci. Stat. Comput. 5, 300): harmonic means where the curve keeps its
 * direction, level where it turns.
 */
export function monotoneSlopes(values: Float32Array): Float32Array {
  const slopes = new Float32Array(values.length)
  for (let index = 1; index < values.length - 1; index++) {
    const before = values[index]! - values[index - 1]!
    const after = values[index + 1]! - values[index]!
    slopes[index] = before * after > 0 ? 2 * before * after / (before + after) : 0
  }
  return slopes
}
