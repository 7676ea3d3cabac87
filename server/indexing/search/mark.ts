import { tokenise } from '../words/tokenise'
import type { Concept } from './types'

/** Words in context, with the ranges (UTF-16 offsets, end exclusive) of those that were asked for. */
export interface MarkedText { text: string, marks: [start: number, end: number][] }

/** The lines about the answer as one text, words that matched marked. */
export function markWords(lines: string[], line: number, concepts: Concept[]): MarkedText {
  const from = Math.max(0, line - (line > 0 ? 1 : 0))
  const text = lines.slice(from, from + 4).join(' ').replace(/\s+/g, ' ').trim()
  const stems = new Set(concepts.flatMap(concept => concept.ways.filter(way => way.weight >= 0.5 || way.finds)).flatMap(way => way.stems))
  const marks: [number, number][] = []
  for (const token of tokenise(text)) {
    if (!stems.has(token.stem)) continue
    const last = marks.at(-1)
    // Neighbouring words are marked as one.
    if (last && /^[\s-]+$/.test(text.slice(last[1], token.start))) last[1] = token.end
    else marks.push([token.start, token.end])
  }
  return { text, marks }
}
