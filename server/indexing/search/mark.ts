import { type Token, tokenise } from '../words/tokenise'
import { saidAt } from './hearing'
import type { Concept } from './types'

/** Words in context, with the ranges (UTF-16 offsets, end exclusive) of those that were asked for. */
export interface MarkedText { text: string, marks: [start: number, end: number][] }

/** The lines about the answer as one text, words that matched marked. */
export function markWords(lines: string[], line: number, concepts: Concept[]): MarkedText {
  const from = Math.max(0, line - 1)
  const text = lines.slice(from, from + 4).join(' ').replace(/\s+/g, ' ').trim()
  const tokens = tokenise(text)
  const wanted = new Set<Token>()
  for (const way of concepts.flatMap(concept => concept.ways.filter(way => way.finds))) {
    for (let i = 0; i < tokens.length; i++) {
      if (!saidAt(way, tokens, undefined, i)) continue
      // Of a phrase its words are marked, not what stands between them.
      for (const token of tokens.slice(i, i + way.stems.length + 2)) if (way.stems.includes(token.stem)) wanted.add(token)
    }
  }
  const marks: [number, number][] = []
  for (const token of tokens) {
    if (!wanted.has(token)) continue
    const last = marks.at(-1)
    // Neighbouring words are marked as one.
    if (last && /^[\s-]+$/.test(text.slice(last[1], token.start))) last[1] = token.end
    else marks.push([token.start, token.end])
  }
  return { text, marks }
}
