import type { Operation } from '#shared/types/trade'

/** The names a question may use: of one build, or none when every build is searched. */
export interface SearchPlan {
  steps: { id: string, number: number, title: string }[]
  parts: { id: string, name: string, aliases: string[] }[]
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
}

/** Stem → word to read instead, found in the build's own vocabulary. */
export type Spelling = ReadonlyMap<string, string>
