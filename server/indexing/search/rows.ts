import { type Token, tokenise } from '../words/tokenise'
import { meaningsIn, topicsIn } from './meanings'
import type { Candidate } from './rank'

/** One caption line of a candidate, read once. */
export interface Line<Of extends Candidate = Candidate> {
  candidate: Of
  /** Its index among the candidate's lines. */
  index: number
  startMs: number
  text: string
  tokens: Token[]
  stems: string[]
  meanings: ReadonlySet<number>
  topics: ReadonlyMap<number, number>
}

/**
 * What is said on each clip, in order of time, as far as candidates hold it: answers begin where they begin, not
 * where passages happen to be cut. One row a caption file.
 */
export function rowsOf<Of extends Candidate>(candidates: Of[]): Line<Of>[][] {
  const rows = new Map<string, Of[]>()
  for (const candidate of candidates) {
    if (!candidate.lines.length) continue
    const key = `${candidate.clipId} ${candidate.trackId ?? ''}`
    const row = rows.get(key)
    if (row) row.push(candidate)
    else rows.set(key, [candidate])
  }
  return [...rows.values()].map(row => row.sort((a, b) => a.startMs - b.startMs || (a.id < b.id ? -1 : 1)).flatMap(candidate => candidate.lines.map((text, index) => {
    return { candidate, index, startMs: candidate.starts[index]!, ...readText(text) }
  })))
}

type ReadText = Pick<Line, 'text' | 'tokens' | 'stems' | 'meanings' | 'topics'>
const read = new Map<string, ReadText>()
/** Lines kept read: those of some hours of captions. Emptied when full, so that odd input cannot fill the memory. */
const REMEMBERED = 10_000

/** Reading a line costs far more than weighing it, and the same lines are candidates again and again. */
function readText(text: string): ReadText {
  const known = read.get(text)
  if (known) return known
  const tokens = tokenise(text)
  const stems = tokens.map(token => token.stem)
  const line = { text, tokens, stems, meanings: meaningsIn(stems), topics: topicsIn(stems) }
  if (read.size >= REMEMBERED) read.clear()
  read.set(text, line)
  return line
}
