import type { PencilledFact, ToldNotShown } from '#server/indexing/pencil/pencil'
import type { Truth } from './load'

export interface Matched { right: number, wanted: number, found: number }

function match<Wanted, Found>(wanted: Wanted[], found: Found[], same: (wanted: Wanted, found: Found) => boolean): Matched {
  const used = new Set<Found>()
  for (const want of wanted) {
    const hit = found.find(have => !used.has(have) && same(want, have))
    if (hit) used.add(hit)
  }
  return { right: used.size, wanted: wanted.length, found: found.length }
}

/** A fact is found when unit and value (within 1 %) are right and it is not more than 8 s away. */
export const matchFacts = (truth: Truth, found: PencilledFact[]): Matched => match(truth.facts, found, (want, have) =>
  Math.abs(want.atMs - have.atMs) <= 8000 && want.unit === have.unit && (want.value === null || Math.abs(want.value - have.value!) <= Math.max(0.06, Math.abs(want.value) * 0.01)))

/** A told place is found when one is named within 15 s. */
export const matchTold = (truth: Truth, found: ToldNotShown[]): Matched => match(truth.offCamera, found, (want, have) => Math.abs(want.atMs - have.atMs) <= 15_000)

/** F1 over all sessions: twice the right ones over all wanted and all found. */
export function f1(matched: Matched[]): number {
  const sum = (of: (one: Matched) => number) => matched.reduce((total, one) => total + of(one), 0)
  const all = sum(one => one.wanted) + sum(one => one.found)
  return all ? 2 * sum(one => one.right) / all : 0
}
