import type { FrameRate } from './media'
import type { Inking, Operation } from './trade'

/** GET /api/search: moments, best first, gathered by step. */
export interface SearchAnswer {
  question: string
  understood: Understood
  /** In the order of their best moment. */
  groups: MomentGroup[]
  /** Moments on this page. */
  count: number
  /** Pass as `after` for the next page; null at the end. */
  next: string | null
  /** Filled when nothing was found. */
  instead: SearchInstead | null
}

/** What the question was read as. */
export interface Understood {
  /** "part: transom · operation: glue"; empty when only plain words were read. */
  summary: string
  parts: { id: string, name: string }[]
  steps: { id: string, number: number, title: string }[]
  operations: Operation[]
  words: string[]
  corrections: { typed: string, read: string }[]
  /** Words that nobody says in this footage. */
  unheard: string[]
}

export interface SearchInstead {
  /** Words that are said here and look like those typed. */
  nearest: { typed: string, words: string[] }[]
  /** Filters without which there would be something. */
  drop: ('step' | 'part' | 'operation' | 'date')[]
  /** Questions that this build answers. */
  examples: string[]
}

export interface MomentGroup {
  build: { id: string, name: string, address: string }
  step: { id: string, number: number, title: string, stage: string } | null
  moments: MomentHit[]
}

export interface MomentHit {
  id: string
  clip: { id: string, name: string, durationMs: number | null, src: string | null, width: number | null, height: number | null, frameRate: FrameRate | null }
  /** Null for people who may see published chapters only. */
  session: { id: string, title: string } | null
  date: string
  chapter: null | { id: string, startMs: number, endMs: number, operation: Operation, inking: Inking, parts: string[] }
  /** Where playing starts. */
  atMs: number
  endMs: number
  picture: Picture | null
  words: { text: string, marks: [start: number, end: number][] }
  score: number
  link: string
}

/** A whole picture, or one tile of a picture sheet. */
export type Picture
  = | { kind: 'poster', url: string, width: number, height: number }
    | { kind: 'tile', url: string, column: number, row: number, columns: number, width: number, height: number }
