import type { Concept, Frequencies, Way } from './types'

/** How telling a stem is: rarer counts more. Never below a tenth, so that nothing asked for is worth nothing. */
export function weightOf(stem: string, frequencies: Frequencies): number {
  const n = frequencies.of.get(stem) ?? 0
  return Math.max(0.1, Math.log(1 + (frequencies.passages - n + 0.5) / (n + 0.5)))
}

/** A concept is as telling as the words asked with; when nobody says those, as the commonest of its other words. */
export function weightOfConcept(concept: Concept, frequencies: Frequencies): number {
  const finding = concept.ways.filter(way => way.finds)
  const said = (way: Way) => Math.min(...way.stems.map(stem => frequencies.of.get(stem) ?? 0))
  const way = finding.find(way => said(way) > 0) ?? finding[0]
  if (!way) return 2
  return Math.max(...way.stems.map(stem => weightOf(stem, frequencies)))
}
