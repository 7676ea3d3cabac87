import { clamp, lowerBound } from './search'

/** A run of the session's clock with footage throughout, and where it begins on the line. */
export interface Stretch { startMs: number, endMs: number, lineMs: number }

/**
 * The ribband as it is drawn: the session's clock with the hours without footage left out, so that clips
 * lie end to end. Overlapping cameras keep their true places.
 */
export interface Line { stretches: Stretch[], lengthMs: number }

/** Folds away every stretch of the session's clock in which no camera ran. */
export function layLine(clips: readonly { startMs: number, endMs: number }[]): Line {
  const stretches: Stretch[] = []
  for (const clip of [...clips].sort((a, b) => a.startMs - b.startMs)) {
    const last = stretches.at(-1)
    if (last && clip.startMs <= last.endMs) last.endMs = Math.max(last.endMs, clip.endMs)
    else stretches.push({ startMs: clip.startMs, endMs: clip.endMs, lineMs: 0 })
  }
  let lengthMs = 0
  for (const stretch of stretches) {
    stretch.lineMs = lengthMs
    lengthMs += stretch.endMs - stretch.startMs
  }
  return { stretches, lengthMs }
}

/** Where a time of the session lies on the line; a time between clips lies on their joint. */
export function toLine(line: Line, sessionMs: number): number {
  const { stretches } = line
  const after = lowerBound(stretches.length, index => stretches[index]!.startMs, sessionMs + 1e-9)
  const stretch = stretches[Math.max(0, after - 1)]
  if (!stretch) return 0
  return stretch.lineMs + clamp(sessionMs - stretch.startMs, 0, stretch.endMs - stretch.startMs)
}

/** The session's time at a place on the line; a joint is the start of what follows it. */
export function fromLine(line: Line, lineMs: number): number {
  const { stretches } = line
  const after = lowerBound(stretches.length, index => stretches[index]!.lineMs, lineMs + 1e-9)
  const stretch = stretches[Math.max(0, after - 1)]
  if (!stretch) return 0
  return stretch.startMs + clamp(lineMs - stretch.lineMs, 0, stretch.endMs - stretch.startMs)
}
