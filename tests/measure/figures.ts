/** One promised figure and how it came out. */
export interface Figure {
  name: string
  value: number
  unit: string
  budget: number
  /** A speed must reach its budget, a cost must stay under it. */
  atLeast?: boolean
}

export function within({ value, budget, atLeast }: Figure): boolean {
  return atLeast ? value >= budget : value <= budget
}

export function percentile(values: number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * share))]!
}

export function print(figures: Figure[]): void {
  for (const figure of figures) {
    const sign = figure.atLeast ? '≥' : '≤'
    console.log(`${within(figure) ? 'within' : 'MISSED'}  ${figure.name}: ${figure.value.toFixed(figure.value < 10 ? 2 : 0)} ${figure.unit} (budget ${sign} ${figure.budget} ${figure.unit})`)
  }
}
