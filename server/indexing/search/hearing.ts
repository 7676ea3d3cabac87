import type { Token } from '../words/tokenise'
import type { Candidate } from './rank'
import type { Concept, Way } from './types'

/** A tag set by a person counts in full; one that the program proposes, by how sure it is and never as much. */
const INKED = 1
const PENCILLED = 0.8

/** How much of a concept a line says; a phrase may run over into the next line. */
export function heardIn(concept: Concept, line: Token[], next: Token[] | undefined): number {
  let heard = 0
  for (const way of concept.ways) {
    for (let i = 0; i < line.length; i++) if (saidAt(way, line, next, i)) heard += way.weight
  }
  return heard
}

/** True when a way is said from word `at` of a line on. */
export function saidAt(way: Way, line: Token[], next: Token[] | undefined, at: number): boolean {
  return line[at]!.stem === way.stems[0] && (way.stems.length === 1 || follows(way.stems, line, next, at))
}

/** The rest of a phrase within three words of its place: "chine log", "chine and the log". */
function follows(stems: string[], line: Token[], next: Token[] | undefined, at: number): boolean {
  const window = [...line.slice(at + 1, at + 1 + stems.length + 2), ...at + stems.length + 2 >= line.length ? next?.slice(0, stems.length) ?? [] : []]
  return stems.slice(1).every(stem => window.some(token => token.stem === stem))
}

/** How far the tags of a candidate's chapter speak of a concept, by who set them. */
export function taggedWith(concept: Concept, { chapter, tagStems }: Candidate): number {
  if (!chapter) return 0
  const trust = chapter.inking === 'inked' ? INKED : PENCILLED * (0.5 + 0.5 * (chapter.confidence ?? 0.5))
  let best = 0
  for (const tag of concept.tags) {
    const name = tag.lexeme.slice(2)
    const holds = { o: chapter.operation === name, s: chapter.stepId === name, p: chapter.partIds.includes(name), t: tagStems.has(name) }[tag.lexeme[0] as 'o' | 's' | 'p' | 't']
    if (holds) best = Math.max(best, tag.weight)
  }
  return best * trust
}
