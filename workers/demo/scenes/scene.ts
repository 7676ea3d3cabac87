import type { View } from '../drawing/stage'

/** One instant of a shot. */
export interface Moment {
  /** Seconds since the shot began. */
  t: number
  /** Share of the shot that has passed, 0 to 1. */
  p: number
  view: View
}

/** Draws one instant of a shot as SVG. */
export type Scene = (moment: Moment) => string

/** Back and forth between −1 and 1, `period` seconds a turn. */
export const sway = (t: number, period: number): number => Math.sin(t / period * 2 * Math.PI)
