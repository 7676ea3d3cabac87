import type { Span } from '#shared/types/media'

/** Points of the drawn sound a second. */
export const PEAKS_PER_SECOND = 20

/** Shortest silence worth a boundary, as in the gaps between spoken sentences. */
const SILENCE_MS = 800
/** Lone clicks (a dropped screw, a keyboard) that do not end a silence. */
const FORGIVEN_POINTS = 1
/** The floor is taken anew for every stretch, because machines are switched on and off. */
const STRETCH_POINTS = 30 * PEAKS_PER_SECOND
const QUIETEST_DB = -90
/** Below this everything is silent, whatever the rest of the clip is like. */
const DEAD_DB = -60
/** Speech rises above its room by more than this; less is the room itself. */
const LEAST_RANGE_DB = 9
/** A silence lies in the lowest third between floor and speech, but not further above the floor than this. */
const ABOVE_FLOOR = 0.35
const MOST_ABOVE_FLOOR_DB = 10

/** Reduces a stream of 16-bit mono samples to one peak and one loudness every 50 ms, whatever its length. */
export class SoundReducer {
  private readonly peaks = new Growing()
  private readonly loudness = new Growing()
  private peak = 0
  private squares = 0
  private inPoint = 0
  private total = 0
  private odd = -1

  constructor(private readonly sampleRate: number) {}

  take(chunk: Buffer) {
    let at = 0
    if (this.odd >= 0 && chunk.length) {
      this.sample(((chunk[0]! << 8 | this.odd) << 16) >> 16)
      this.odd = -1
      at = 1
    }
    let end = this.pointEnd()
    for (; at + 1 < chunk.length; at += 2) {
      const value = ((chunk[at + 1]! << 8 | chunk[at]!) << 16) >> 16
      const size = value < 0 ? -value : value
      if (size > this.peak) this.peak = size
      this.squares += value * value
      this.inPoint++
      if (++this.total >= end) {
        this.close()
        end = this.pointEnd()
      }
    }
    if (at < chunk.length) this.odd = chunk[at]!
  }

  /**
   * Peaks as bytes (255 full scale) and loudness in dB below full scale, 20 of each a second.
   * @param atMost points to keep
   */
  finish(atMost = Infinity): { peaks: Uint8Array, loudnessDb: number[] } {
    if (this.inPoint > 0) this.close()
    const loudness = this.loudness.bytes().subarray(0, atMost)
    return { peaks: this.peaks.bytes().subarray(0, atMost), loudnessDb: Array.from(loudness, byte => -byte / 2) }
  }

  private sample(value: number) {
    this.peak = Math.max(this.peak, Math.abs(value))
    this.squares += value * value
    this.inPoint++
    if (++this.total >= this.pointEnd()) this.close()
  }

  private pointEnd(): number {
    return Math.floor((this.peaks.length + 1) * this.sampleRate / PEAKS_PER_SECOND)
  }

  private close() {
    this.peaks.push(Math.min(255, Math.round(this.peak / 32768 * 255)))
    const power = this.squares / this.inPoint / 32768 ** 2
    const db = power > 0 ? 10 * Math.log10(power) : QUIETEST_DB
    // Half decibels in a byte: six hours take 432 kB.
    this.loudness.push(Math.round(Math.min(0, Math.max(QUIETEST_DB, db)) * -2))
    this.peak = 0
    this.squares = 0
    this.inPoint = 0
  }
}

/**
 * Finds silences: stretches of 0.8 s or more near the noise floor of their surroundings. A fixed level (−45 dB) finds
 * none beside a running dust collector and nothing but silence in a quiet recording, so floor (10th percentile) and
 * speech (90th) are taken from each half minute and its neighbours.
 * @param loudnessDb loudness in dB below full scale, {@link PEAKS_PER_SECOND} a second
 */
export function findSilences(loudnessDb: readonly number[]): Span[] {
  const thresholds = stretchThresholds(loudnessDb)
  const quiet = loudnessDb.map((db, i) => db <= thresholds[Math.floor(i / STRETCH_POINTS)]!)
  const silences: Span[] = []
  const pointMs = 1000 / PEAKS_PER_SECOND
  for (let i = 0; i < quiet.length; i++) {
    if (!quiet[i]) continue
    let end = i + 1
    for (let j = end; j < quiet.length && j - end <= FORGIVEN_POINTS; j++) if (quiet[j]) end = j + 1
    if ((end - i) * pointMs >= SILENCE_MS) silences.push({ startMs: i * pointMs, endMs: end * pointMs })
    i = end
  }
  return silences
}

function stretchThresholds(loudnessDb: readonly number[]): number[] {
  const stretches = Math.ceil(loudnessDb.length / STRETCH_POINTS)
  return Array.from({ length: stretches }, (_, i) => {
    const around = loudnessDb.slice(Math.max(0, i - 1) * STRETCH_POINTS, (i + 2) * STRETCH_POINTS).sort((a, b) => a - b)
    const floor = around[Math.floor(around.length * 0.1)]!
    const speech = around[Math.floor(around.length * 0.9)]!
    const range = speech - floor
    if (range < LEAST_RANGE_DB) return DEAD_DB
    return Math.max(DEAD_DB, floor + Math.min(MOST_ABOVE_FLOOR_DB, range * ABOVE_FLOOR))
  })
}

/** A list of bytes that grows without boxing each one. */
class Growing {
  length = 0
  private data = new Uint8Array(4096)

  push(byte: number) {
    if (this.length === this.data.length) {
      const larger = new Uint8Array(this.data.length * 2)
      larger.set(this.data)
      this.data = larger
    }
    this.data[this.length++] = byte
  }

  bytes(): Uint8Array {
    return this.data.slice(0, this.length)
  }
}
