import { lowerBound } from './search'
import { fromX, toX, type View } from './scale'

/**
 * Of many times, those to mark in sight: at most one in each `leastPx`. Which of them stay depends on the
 * scale only, so that marks do not flicker while the strip is moved.
 */
export function thinMarks(times: ArrayLike<number>, view: View, leastPx: number): number[] {
  const cell = view.msPerPx * leastPx
  const end = fromX(view, view.widthPx)
  const kept: number[] = []
  let index = lowerBound(times.length, i => times[i]!, Math.floor(view.startMs / cell) * cell)
  while (index < times.length && times[index]! <= end) {
    kept.push(times[index]!)
    const next = (Math.floor(times[index]! / cell) + 1) * cell
    index = Math.max(index + 1, lowerBound(times.length, i => times[i]!, next))
  }
  return kept
}

export interface Label { lineMs: number, text: string, widthPx: number }

/**
 * Of labels in order, those that have room, counted from the start of the whole line at this scale: the same
 * ones stay while the strip is moved. Each is centred on its place.
 */
export function fitLabels<L extends Label>(labels: readonly L[], msPerPx: number, gapPx: number): L[] {
  let free = -Infinity
  return labels.filter((label) => {
    const centre = label.lineMs / msPerPx
    if (centre - label.widthPx / 2 < free) return false
    free = centre + label.widthPx / 2 + gapPx
    return true
  })
}

/** Keeps a centred label within the strip. */
export function labelX(view: View, label: Label): number {
  const half = label.widthPx / 2
  const x = toX(view, label.lineMs)
  return Math.min(Math.max(x, half + 2), view.widthPx - half - 2)
}
