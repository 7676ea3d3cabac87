import { stemmer } from 'stemmer'
import { IRREGULAR, SPELLINGS } from './irregular'
import { STOP_WORDS } from './stopWords'

/** A word of a text: as written (lower case, without accents), its stem, and where it stands (UTF-16 offsets). */
export interface Token { word: string, stem: string, start: number, end: number }

const WORD = /\p{L}[\p{L}\p{M}]*(?:['’]\p{L}+)?|\d+(?:[.,]\d+)*|[¼-¾⅐-⅞]/gu
const MARKS = /\p{M}+/gu
const stems = new Map<string, string>()
/** Enough for every word a shop says; emptied when full so that odd input cannot fill the memory. */
const REMEMBERED = 50_000

/**
 * The stem that stands for all forms of a word: glue, glued, gluing. Porter's algorithm (package `stemmer`)
 * behind a short list of irregular verbs of the shop and British and American spellings. One stemmer in
 * TypeScript for index, question and marked words, rather than PostgreSQL's dictionary, so that the three
 * can never disagree, and so that pure code can be tested without a database.
 */
export function stemOf(word: string): string {
  const known = stems.get(word)
  if (known !== undefined) return known
  const base = IRREGULAR.get(word) ?? word
  const stem = /^\d/.test(base) ? base.replace(',', '.') : stemmer(SPELLINGS.get(base) ?? base)
  if (stems.size >= REMEMBERED) stems.clear()
  stems.set(word, stem)
  return stem
}

/** All words of a text in order. Hyphens part words; a possessive or a contraction's tail is dropped. */
export function tokenise(text: string): Token[] {
  const tokens: Token[] = []
  for (const match of text.matchAll(WORD)) {
    const written = match[0]
    // A word of a hundred letters is noise, and would be stored and searched as one.
    if (written.length > 60) continue
    const word = plain(written)
    tokens.push({ word, stem: stemOf(word), start: match.index, end: match.index + written.length })
  }
  return tokens
}

/** Small letters without accents, possessives or contraction tails: "Builder’s" → "builder". */
function plain(written: string): string {
  const lower = written.toLowerCase()
  // eslint-disable-next-line no-control-regex -- plain ASCII needs no folding
  const folded = /^[\x00-\x7F]*$/.test(lower) ? lower : lower.normalize('NFKD').replace(MARKS, '')
  return folded.replace(/['’].*$/, '')
}

/** True for words that say nothing about what is shown. */
export function isStopWord(word: string): boolean {
  return STOP_WORDS.has(word)
}

/** The stems of a phrase, for lexicons and names, without the words that are never asked for: as the index holds them. */
export function stemsOf(text: string): string[] {
  return tokenise(text).filter(token => !isStopWord(token.word)).map(token => token.stem)
}
