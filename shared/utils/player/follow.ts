import type { PlacedClip } from '../ribband/clock'
import { frameToMs, msToFrame } from '../time/frames'

type Playable = PlacedClip<{ id: string, durationMs: number | null, offsetMs: number, camera: string, src: string | null }>

/** A place in the footage: a clip and a millisecond of it. */
export interface Place<P> { clip: P, ms: number }

/** Last millisecond of a clip that a frame is shown at. */
export function lastMs(clip: { startMs: number, endMs: number }): number {
  return Math.max(0, clip.endMs - clip.startMs - 1)
}

/**
 * Where playing goes on when a clip ends: another camera that runs on at that time, own band first, else the next
 * clip that begins, however long the gap. Clips that cannot be played yet are passed over. Null at the end of the session.
 */
export function placeAfter<P extends Playable>(clips: readonly P[], from: P): Place<P> | null {
  const others = clips.filter(clip => clip.id !== from.id && clip.clip.src !== null && clip.endMs > from.endMs)
  const running = others.filter(clip => clip.startMs <= from.endMs).sort((a, b) => Number(b.lane === from.lane) - Number(a.lane === from.lane) || b.startMs - a.startMs)[0]
  if (running) return { clip: running, ms: from.endMs - running.startMs }
  const next = others.sort((a, b) => a.startMs - b.startMs || Number(b.lane === from.lane) - Number(a.lane === from.lane))[0]
  return next ? { clip: next, ms: 0 } : null
}

/** Where running backwards goes on when a clip's beginning is reached. */
export function placeBefore<P extends Playable>(clips: readonly P[], from: P): Place<P> | null {
  const others = clips.filter(clip => clip.id !== from.id && clip.clip.src !== null && clip.startMs < from.startMs)
  const running = others.filter(clip => clip.endMs >= from.startMs).sort((a, b) => Number(b.lane === from.lane) - Number(a.lane === from.lane) || a.endMs - b.endMs)[0]
  if (running) return { clip: running, ms: Math.min(lastMs(running), Math.max(0, from.startMs - 1 - running.startMs)) }
  const last = others.sort((a, b) => b.endMs - a.endMs || Number(b.lane === from.lane) - Number(a.lane === from.lane))[0]
  return last ? { clip: last, ms: lastMs(last) } : null
}

/** A place so many ms on or back; over the edge of a clip into the next one, never stuck in a gap. */
export function moved<P extends Playable>(clips: readonly P[], from: Place<P>, byMs: number): Place<P> {
  const to = from.ms + byMs
  if (to < 0) return placeBefore(clips, from.clip) ?? { clip: from.clip, ms: 0 }
  if (to > lastMs(from.clip)) return placeAfter(clips, from.clip) ?? { clip: from.clip, ms: lastMs(from.clip) }
  return { clip: from.clip, ms: to }
}

const DEFAULT_RATE = { numerator: 25, denominator: 1 }

/** The first millisecond of the frame `by` frames on (or back), by the clip's own exact rate; 25 a second without one. */
export function framesOn(ms: number, by: number, rate: { numerator: number, denominator: number } | null | undefined): number {
  const { numerator: num, denominator: den } = rate ?? DEFAULT_RATE
  return frameToMs(Math.max(0, msToFrame(Math.max(0, Math.round(ms)), { num, den }) + by), { num, den })
}

/**
 * The first millisecond of the first frame that begins at `ms` or after it. At `ms` itself the frame before may still
 * be on screen, and where a scene begins that is the scene before. Without a rate `ms` itself.
 */
export function frameFrom(ms: number, rate: { numerator: number, denominator: number } | null | undefined): number {
  const whole = Math.max(0, Math.round(ms))
  if (!rate) return whole
  const exact = { num: rate.numerator, den: rate.denominator }
  const frame = msToFrame(whole, exact)
  const begins = frameToMs(frame, exact)
  return begins >= whole ? begins : frameToMs(frame + 1, exact)
}

/** Seconds to give a video element: the middle of the millisecond, so that rounding cannot fall into the frame before. */
export function seekSeconds(ms: number): number {
  return (ms + 0.5) / 1000
}

const SHUTTLE = [1, 2, 4, 8]

/** The shuttle after another press of J (−1) or L (+1): faster each time, from either direction through 1×. */
export function shuttleSpeed(speed: number, direction: 1 | -1): number {
  if (speed * direction <= 0) return direction
  const faster = SHUTTLE.find(one => one > Math.abs(speed)) ?? SHUTTLE.at(-1)!
  return faster * direction
}
