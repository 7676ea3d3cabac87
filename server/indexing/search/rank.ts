import type { Inking, Operation } from '#shared/types/trade'
import { type Token, tokenise } from '../words/tokenise'
import { answers } from './askedFor'
import type { Concept, Understanding, Way } from './types'

/** A passage that may answer, with the tags of the chapter it lies in as they stand now. */
export interface Candidate {
  id: string
  clipId: string
  startMs: number
  endMs: number
  starts: number[]
  lines: string[]
  chapter: null | { id: string, startMs: number, endMs: number, stepId: string | null, operation: Operation, inking: Inking, confidence: number | null, partIds: string[] }
  /** Stems of the tags' words. */
  tagStems: ReadonlySet<string>
}

export interface Ranked<Of extends Candidate = Candidate> {
  candidate: Of
  /** Higher is better; comparable within one question only. */
  score: number
  /** Where the answer starts: the first of the two lines that say most of what was asked, ms on the clip. */
  atMs: number
  /** Index of that line; -1 when the tags alone answered. */
  line: number
}

export interface Frequencies { passages: number, of: ReadonlyMap<string, number> }

/** BM25's usual constants; passages are of much the same length, so length counts for little. */
const K = 1.2
const B = 0.3
const USUAL_WORDS = 70
/** A tag set by a person is worth more than the word said once; one that the program proposes, less. */
const INKED = 1.5
const PENCILLED = 0.8
/** A chapter tagged with all that was asked is an answer from its beginning; how near that counts, ms, and for how much. */
const BEGINNING_MS = 10_000
const BEGINNING = 1.25
const TALK_OF_OTHER_TIMES = /\b(?:later|next time|next week|tomorrow|last time|last week|eventually|off camera|didn'?t film|going to have to)\b/i

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

/**
 * Ranks candidates by what is said and what is tagged: for each concept BM25-like weight of its words plus its
 * tags (inked over pencilled), more for passages that cover more of the question and say it close together,
 * less for talk of other times. Order: score, then clip and time, so that paging is stable.
 */
export function rank<Of extends Candidate>(question: Understanding, candidates: Of[], frequencies: Frequencies): Ranked<Of>[] {
  const weights = question.concepts.map(concept => weightOfConcept(concept, frequencies))
  const all = weights.reduce((sum, weight) => sum + weight, 0) || 1
  return candidates
    .map(candidate => score(question, weights, all, candidate))
    .sort((a, b) => b.score - a.score || compare(a.candidate.clipId, b.candidate.clipId) || a.candidate.startMs - b.candidate.startMs || compare(a.candidate.id, b.candidate.id))
}

const compare = (a: string, b: string) => a < b ? -1 : a > b ? 1 : 0

function score<Of extends Candidate>(question: Understanding, weights: number[], all: number, candidate: Of): Ranked<Of> {
  const lines = candidate.lines.map(line => tokenise(line))
  const length = lines.reduce((sum, line) => sum + line.length, 0)
  const perLine = lines.map(() => 0)
  let total = 0
  let covered = 0
  let spokenWeight = 0
  let taggedWhole = candidate.chapter !== null && question.concepts.length > 0
  question.concepts.forEach((concept, c) => {
    const weight = weights[c]!
    let heard = 0
    lines.forEach((line, i) => {
      const here = heardIn(concept, line, lines[i + 1])
      heard += here
      perLine[i]! += weight * Math.min(here, 1.2)
    })
    const spoken = heard * (K + 1) / (heard + K * (1 - B + B * length / USUAL_WORDS))
    const tagged = taggedWith(concept, candidate)
    if (!tagged) taggedWhole = false
    total += weight * (spoken + tagged)
    covered += weight * Math.min(1, Math.max(heard, tagged))
    spokenWeight += weight * Math.min(1, heard)
  })
  const best = bestLine(perLine)
  const together = best === -1 ? 0 : (perLine[best]! + (perLine[best + 1] ?? 0)) / all
  let result = total * (0.35 + 0.65 * covered / all) + 0.5 * all * Math.min(1, together)
  if (best !== -1) {
    const around = candidate.lines.slice(best, best + 3).join(' ')
    if (answers(question.askedFor, around)) result *= 1.25
    if (TALK_OF_OTHER_TIMES.test(around)) result *= 0.7
  }
  if (taggedWhole && candidate.startMs - candidate.chapter!.startMs < BEGINNING_MS) result *= BEGINNING
  // A stretch of a tagged chapter in which nothing asked for is said answers as a whole, from its start.
  const line = spokenWeight > 0 ? best : -1
  return { candidate, score: Math.round(result * 1e6) / 1e6, atMs: line === -1 ? candidate.startMs : candidate.starts[line]!, line }
}

/** How much of a concept a line says; a phrase may run over into the next line. */
function heardIn(concept: Concept, line: Token[], next: Token[] | undefined): number {
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

function taggedWith(concept: Concept, { chapter, tagStems }: Candidate): number {
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

/** The line with which the best pair of lines starts; a pair whose first line says nothing starts with the second. */
function bestLine(perLine: number[]): number {
  let best = -1
  let most = 0
  for (let i = 0; i < perLine.length; i++) {
    const pair = perLine[i]! + (perLine[i + 1] ?? 0) * 0.9
    if (perLine[i]! > 0 && pair > most + 1e-9) {
      most = pair
      best = i
    }
  }
  return best
}
