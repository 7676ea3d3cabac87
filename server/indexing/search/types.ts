import type { Operation } from '#shared/types/trade'
import type { Meant } from './meanings'

/** The names a question may use: of one build, or none when every build is searched. */
export interface SearchPlan {
  steps: { id: string, number: number, title: string, stage?: string, description?: string, /** Names of its parts. */ parts?: string[], materials?: string[] }[]
  parts: { id: string, name: string, aliases: string[], material?: string }[]
}

/** One way of saying a concept: stems that must all occur in a passage, near one another when more than one. */
export interface Way {
  stems: string[]
  /** 1 for the words as asked, less for synonyms. */
  weight: number
  /** False for words that only lend weight to a passage found otherwise. */
  finds: boolean
}

/** A tag lexeme (`o:glue`, `p:<id>`, `s:<id>`, `t:<stem>`) that shows the concept without a word being said. */
export interface Tag { lexeme: string, weight: number }

/** One thing the question speaks of. */
export interface Concept {
  kind: 'part' | 'step' | 'operation' | 'word'
  label: string
  ways: Way[]
  tags: Tag[]
}

/** What kind of answer is wanted: a passage that holds one is worth more. */
export type AskedFor = 'length' | 'angle' | 'time' | 'count' | 'ratio' | 'temperature' | 'product' | 'reason' | 'manner'

export interface Understanding {
  parts: { id: string, name: string }[]
  steps: { id: string, number: number, title: string }[]
  operations: Operation[]
  /** Words that are neither part, step nor operation, as typed (or as corrected). */
  rest: string[]
  askedFor: AskedFor | null
  /** Words read as another, because nobody says the one typed. */
  corrections: { typed: string, read: string }[]
  concepts: Concept[]
  /** Plain words that builders say otherwise (`meanings.ts`). */
  meant: Meant[]
  /** Topics of the shop that the question touches, with weights. */
  topics: ReadonlyMap<number, number>
  /** How far it is about each step of the plan, by id, 0 to 1. */
  about: ReadonlyMap<string, number>
}

/** In how many passages stems are said: in one build, or everywhere. */
export interface Frequencies { passages: number, of: ReadonlyMap<string, number> }

/** Stem → word to read instead, found in the build's own vocabulary. */
export type Spelling = ReadonlyMap<string, string>
