import type { Operation } from '#shared/types/trade'
import { isStopWord, stemOf, stemsOf, type Token, tokenise } from '../words/tokenise'
import { aboutSteps } from './aboutSteps'
import { readAskedFor } from './askedFor'
import { meantIn, topicsIn } from './meanings'
import { distinct, LEXICON_STEMS, OPERATION_PHRASES, standsAt, TOOL_PHRASES, waysOfOperation, waysOfWord } from './phrases'
import type { Concept, SearchPlan, Spelling, Understanding, Way } from './types'

/** A question longer than this says nothing more that search could use, and would cost more. */
const MOST_WORDS = 16
const MOST_CONCEPTS = 8
const MOST_LETTERS = 400
const MOST_SPOKEN = 40

interface NamedPart { id: string, name: string, names: string[][] }

/**
 * Reads a question: the parts, steps and operations it names, what is left, and the kind of answer it wants.
 * Pure; never throws. `spelling` replaces words that nobody says (see `unknownWords`).
 */
export function understand(question: string, plan: SearchPlan, spelling: Spelling = new Map()): Understanding {
  const corrections: Understanding['corrections'] = []
  const words = contentWords(question).map((token) => {
    const read = spelling.get(token.stem)
    if (read === undefined) return token
    corrections.push({ typed: token.word, read })
    return { ...token, word: read, stem: stemOf(read) }
  })
  const stems = words.map(word => word.stem)
  const parts = plan.parts.map(part => ({ id: part.id, name: part.name, names: [part.name, ...part.aliases].map(name => stemsOf(name)).filter(name => name.length > 0) }))
  const concepts: Concept[] = []
  const found = { parts: new Map<string, string>(), steps: new Map<string, SearchPlan['steps'][number]>(), operations: new Set<Operation>(), rest: [] as string[] }

  for (const step of namedSteps(question, stems, plan)) {
    found.steps.set(step.id, step)
    if (!saidByNumber(question, step.number)) continue
    concepts.push({ kind: 'step', label: `step ${step.number}`, ways: [], tags: [{ lexeme: `s:${step.id}`, weight: 1 }] })
  }
  const numbers = new Set([...found.steps.values()].map(step => String(step.number)))
  for (let at = 0; at < words.length && concepts.length < MOST_CONCEPTS;) {
    const read = readPart(stems, at, parts) ?? readOperation(stems, at) ?? readTool(stems, at)
    const asked = stems.slice(at, at + (read?.length ?? 1))
    if (read?.kind === 'part') {
      for (const part of read.parts) found.parts.set(part.id, part.name)
      concepts.push(partConcept(read.parts, asked, words.slice(at, at + read.length).map(word => word.word).join(' ')))
    }
    else if (read?.kind === 'operation') {
      found.operations.add(read.operation)
      const known = concepts.find(concept => concept.tags.some(tag => tag.lexeme === `o:${read.operation}`))
      if (known) known.ways = distinct([{ stems: asked, weight: 1, finds: true }, ...known.ways])
      else concepts.push({ kind: 'operation', label: read.operation, ways: waysOfOperation(read.operation, asked), tags: [{ lexeme: `o:${read.operation}`, weight: 1 }] })
    }
    else if (!(words[at]!.word === 'step' || (numbers.has(words[at]!.word) && saidByNumber(question, Number(words[at]!.word))))) {
      const label = words.slice(at, at + asked.length).map(word => word.word).join(' ')
      found.rest.push(label)
      const tools = read?.kind === 'tool' ? read.operations.map(operation => ({ lexeme: `o:${operation}`, weight: 0.2 })) : []
      concepts.push({ kind: 'word', label, ways: waysOfWord(asked), tags: [...asked.length === 1 ? [{ lexeme: `t:${asked[0]}`, weight: 0.6 }] : [], ...tools] })
    }
    at += asked.length
  }
  const spoken = tokenise(question.slice(0, MOST_LETTERS)).slice(0, MOST_SPOKEN).map(token => spelling.has(token.stem) ? stemOf(spelling.get(token.stem)!) : token.stem)
  return {
    parts: [...found.parts].map(([id, name]) => ({ id, name })), steps: [...found.steps.values()], operations: [...found.operations],
    rest: found.rest, askedFor: readAskedFor(question), corrections, concepts,
    meant: meantIn(spoken), topics: topicsIn(spoken), about: aboutSteps(question.slice(0, MOST_LETTERS), plan),
  }
}

/** Words that neither plan nor lexicon knows; those that nobody ever says are slips of the pen. */
export function unknownWords(question: string, plan: SearchPlan): Token[] {
  const known = new Set(planStems(plan))
  return contentWords(question).filter(token => token.word.length > 2 && !/^\d/.test(token.word) && !known.has(token.stem) && !LEXICON_STEMS.has(token.stem))
}

/** Every stem of the plan's titles, part names and aliases. */
export function planStems(plan: SearchPlan): string[] {
  return [...plan.steps.map(step => step.title), ...plan.parts.flatMap(part => [part.name, ...part.aliases])].flatMap(text => stemsOf(text))
}

/** "How long", "how wide": the second word says what is asked for, not what was said. */
const FRAME = /\b(how) (?:long|wide|thick|deep|high|tall|far|big|large|close|tight|often|steep|hot|cold|warm)\b/gi

function contentWords(question: string): Token[] {
  return tokenise(question.slice(0, MOST_LETTERS).replace(FRAME, '$1')).filter(token => !isStopWord(token.word)).slice(0, MOST_WORDS)
}

const saidByNumber = (question: string, number: number) => new RegExp(`\\bsteps?\\s*(?:no\\.?|number|#)?\\s*${number}\\b`, 'i').test(question)

/** Steps named by number, or by a title of which every telling word is in the question. */
function namedSteps(question: string, stems: string[], plan: SearchPlan) {
  const asked = new Set(stems)
  return plan.steps.filter((step) => {
    if (saidByNumber(question, step.number)) return true
    const title = tokenise(step.title).filter(token => !isStopWord(token.word))
    return title.length > 1 && title.every(token => asked.has(token.stem))
  })
}

/**
 * The parts named at a place: by a whole name or alias ("bow transom"), or by the last word of one
 * ("transom" is both transoms, but not the transom cheek). The longest name wins.
 */
function readPart(stems: string[], at: number, parts: NamedPart[]) {
  let length = 0
  for (const part of parts) for (const name of part.names) length = Math.max(length, standsAt(stems, at, name))
  const whole = parts.filter(part => part.names.some(name => name.length === length && standsAt(stems, at, name)))
  const kin = length > 1 ? [] : parts.filter(part => part.names.some(name => name.length > 1 && name.at(-1) === stems[at]))
  const named = [...new Set([...length ? whole : [], ...kin])]
  return named.length ? { kind: 'part' as const, length: Math.max(length, 1), parts: named } : null
}

function readOperation(stems: string[], at: number) {
  const phrase = OPERATION_PHRASES.find(phrase => standsAt(stems, at, phrase.stems))
  return phrase ? { kind: 'operation' as const, length: phrase.stems.length, operation: phrase.meaning } : null
}

function readTool(stems: string[], at: number) {
  const phrase = TOOL_PHRASES.find(phrase => standsAt(stems, at, phrase.stems))
  return phrase ? { kind: 'tool' as const, length: phrase.stems.length, operations: phrase.meaning } : null
}

function partConcept(parts: NamedPart[], asked: string[], label: string): Concept {
  const names: Way[] = parts.flatMap(part => part.names).map(stems => ({ stems, weight: 0.8, finds: true }))
  // "The bow transom" is soon called "the transom"; the last word of the name asked for finds it, for less.
  const short: Way[] = asked.length > 1 ? [{ stems: asked.slice(-1), weight: 0.5, finds: true }] : []
  return {
    kind: 'part',
    label: parts.length === 1 ? parts[0]!.name : label,
    ways: distinct([{ stems: asked, weight: 1, finds: true }, ...names, ...short, ...waysOfWord(asked).map(way => ({ ...way, weight: way.weight * 0.8 }))]),
    tags: parts.map(part => ({ lexeme: `p:${part.id}`, weight: 1 })),
  }
}
