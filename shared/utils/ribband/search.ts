/** First index whose value is not below `wanted`; `count` when there is none. Values must not decrease. */
export function lowerBound(count: number, valueAt: (index: number) => number, wanted: number): number {
  let low = 0
  let high = count
  while (low < high) {
    const middle = (low + high) >>> 1
    if (valueAt(middle) < wanted) low = middle + 1
    else high = middle
  }
  return low
}

export function clamp(value: number, least: number, most: number): number {
  return value < least ? least : value > most ? Math.max(most, least) : value
}
