/**
 * How often a chapter was right on labelled sessions that the weights had not seen, by the likelihood the model
 * gave its step: pairs of likelihood and share right, both rising, between which lines are drawn.
 */
export type Curve = readonly (readonly [likelihood: number, right: number])[]

/** A likelihood of the model as a share that can be relied on, 0 to 1, to a thousandth. */
export function confidenceOf(likelihood: number, curve: Curve): number {
  const x = Math.min(1, Math.max(0, likelihood))
  let [x0, y0] = curve[0] ?? [0, 0]
  for (const [x1, y1] of curve.slice(1)) {
    if (x <= x1) return thousandth(x1 > x0 ? y0 + (y1 - y0) * (x - x0) / (x1 - x0) : y1)
    x0 = x1
    y0 = y1
  }
  return thousandth(y0)
}

const thousandth = (value: number) => Math.round(Math.min(1, Math.max(0, value)) * 1000) / 1000
