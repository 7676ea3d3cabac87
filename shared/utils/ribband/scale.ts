import type { Line } from './line'
import { clamp } from './search'

/** What of the line is in sight: `startMs` of the line at the left edge, drawn at `msPerPx`. */
export interface View { startMs: number, msPerPx: number, widthPx: number }

/** Bare floor left beside the line's ends, so that an end can be seen and taken hold of. */
export const MARGIN_PX = 16
/** Full size: a frame of 33 ms is 24 px wide. */
export const FINEST_MS_PER_PX = 33 / 24
/** A session shorter than this does not fill the strip: 2 s of footage in 1300 px would be a microscope. */
const COARSEST_AT_LEAST = FINEST_MS_PER_PX * 2

export const toX = (view: View, lineMs: number): number => (lineMs - view.startMs) / view.msPerPx
export const fromX = (view: View, x: number): number => view.startMs + x * view.msPerPx
export const viewEnd = (view: View): number => fromX(view, view.widthPx)

/** Milliseconds a pixel at which the whole line is in sight. */
export function wholeScale(lengthMs: number, widthPx: number): number {
  return Math.max(COARSEST_AT_LEAST, lengthMs / Math.max(1, widthPx - 2 * MARGIN_PX))
}

export function wholeView(lengthMs: number, widthPx: number): View {
  return holdView({ startMs: 0, msPerPx: wholeScale(lengthMs, widthPx), widthPx }, lengthMs)
}

/** Keeps a view between full size and the whole line, and on the line. */
export function holdView(view: View, lengthMs: number): View {
  const msPerPx = clamp(view.msPerPx, FINEST_MS_PER_PX, wholeScale(lengthMs, view.widthPx))
  const margin = MARGIN_PX * msPerPx
  const room = lengthMs + margin - view.widthPx * msPerPx
  return { startMs: clamp(view.startMs, -margin, Math.max(-margin, room)), msPerPx, widthPx: view.widthPx }
}

/** Zooms so that what lies at `x` stays there. A factor above 1 comes nearer. */
export function zoomAt(view: View, factor: number, x: number, lengthMs: number): View {
  const msPerPx = clamp(view.msPerPx / factor, FINEST_MS_PER_PX, wholeScale(lengthMs, view.widthPx))
  return holdView({ startMs: fromX(view, x) - x * msPerPx, msPerPx, widthPx: view.widthPx }, lengthMs)
}

export function panBy(view: View, px: number, lengthMs: number): View {
  return holdView({ ...view, startMs: view.startMs + px * view.msPerPx }, lengthMs)
}

/** Brings a stretch of the line into sight with some floor on either side. */
export function showRange(view: View, startMs: number, endMs: number, lengthMs: number): View {
  const room = Math.max(40, view.widthPx - 2 * Math.max(MARGIN_PX, view.widthPx * 0.08))
  const msPerPx = clamp((endMs - startMs) / room, FINEST_MS_PER_PX, wholeScale(lengthMs, view.widthPx))
  return holdView({ startMs: (startMs + endMs - view.widthPx * msPerPx) / 2, msPerPx, widthPx: view.widthPx }, lengthMs)
}

/** The same scale, moved no further than needed to have a place in sight; centred when it is far off. */
export function reveal(view: View, lineMs: number, lengthMs: number): View {
  const x = toX(view, lineMs)
  const inset = Math.min(48, view.widthPx / 8)
  if (x >= inset && x <= view.widthPx - inset) return view
  const far = x < -view.widthPx || x > 2 * view.widthPx
  const target = far ? view.widthPx / 2 : x < inset ? inset : view.widthPx - inset
  return panBy(view, x - target, lengthMs)
}

const SECOND = 1000
const MINUTE = 60 * SECOND
const HOUR = 60 * MINUTE
/** 1-2-5 below a second; above it the steps nearest to 1-2-5 that divide a minute, an hour, a day. */
const STEPS = [
  ...[10, 20, 50, 100, 200, 500],
  ...[1, 2, 5, 10, 30].map(n => n * SECOND), ...[1, 2, 5, 10, 30].map(n => n * MINUTE), ...[1, 2, 4, 12, 24].map(n => n * HOUR),
]

/** The smallest clock step whose labels stand at least `leastPx` apart. */
export function clockStep(msPerPx: number, leastPx: number): number {
  return STEPS.find(step => step / msPerPx >= leastPx) ?? 24 * HOUR
}

/** The next finer step for unlabelled ticks, at least `leastPx` apart and dividing the labelled one; or null. */
export function finerStep(step: number, msPerPx: number, leastPx: number): number | null {
  return STEPS.find(finer => finer < step && step % finer === 0 && finer / msPerPx >= leastPx) ?? null
}

export interface Tick { sessionMs: number, lineMs: number }

/** Multiples of `step` on the session's clock in sight, each at its place on the line. */
export function ticks(line: Line, view: View, step: number): Tick[] {
  const from = view.startMs
  const to = viewEnd(view)
  const found: Tick[] = []
  for (const { startMs, endMs, lineMs } of line.stretches) {
    if (lineMs > to) break
    const last = Math.min(endMs, startMs + to - lineMs)
    const first = Math.max(startMs, startMs + from - lineMs)
    for (let at = Math.ceil(first / step) * step; at <= last; at += step) found.push({ sessionMs: at, lineMs: lineMs + at - startMs })
  }
  return found
}

/** How much is in sight, in words: '45 s in sight', '12 min in sight'. */
export function scaleWords(view: View): string {
  const seconds = view.widthPx * view.msPerPx / SECOND
  if (seconds < 10) return `${seconds.toFixed(1)} s in sight`
  if (seconds < 120) return `${Math.round(seconds)} s in sight`
  return seconds < 7200 ? `${Math.round(seconds / 60)} min in sight` : `${(seconds / 3600).toFixed(1)} h in sight`
}
