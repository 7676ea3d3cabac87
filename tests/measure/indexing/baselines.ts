import type { Operation } from '#shared/types/trade'
import { OPERATION_LEXICON } from '#server/indexing/lexicon/operations'
import { stemsOf } from '#server/indexing/words/tokenise'
import type { LabelledSession } from './load'
import type { ProposedChapter } from './score'

/** What an hour's work would give, beside which the program's figures are read. */
interface Scores { steps: Float64Array[], operations: Map<Operation, number>[] }

const K = 1.2
const B = 0.75
const OPERATIONS = Object.entries(OPERATION_LEXICON).map(([operation, words]) => [operation as Operation, new Set(`${words.plain}, ${words.near}`.split(',').flatMap(phrase => stemsOf(phrase)))] as const)

/** BM25 of every cue against every step's words (title, description, parts, materials), and shares of operation words. */
function scoresOf(session: LabelledSession, allowed: ReadonlySet<number>): Scores {
  const documents = session.steps.map((step) => {
    const names = step.parts.flatMap(name => session.parts.find(part => part.name === name) ?? []).flatMap(part => [part.name, ...part.aliases])
    return stemsOf([step.title, step.description, step.materials.join(' '), ...names].join(' '))
  })
  const mean = documents.reduce((sum, words) => sum + words.length, 0) / documents.length
  const counts = documents.map(words => words.reduce((of, word) => of.set(word, (of.get(word) ?? 0) + 1), new Map<string, number>()))
  const rarity = (word: string) => {
    const n = counts.filter(of => of.has(word)).length
    return Math.log(1 + (documents.length - n + 0.5) / (n + 0.5))
  }
  return {
    steps: session.cues.map((cue) => {
      const words = new Set(stemsOf(cue.text))
      return Float64Array.from(documents, (document, s) => {
        if (!allowed.has(session.steps[s]!.number)) return -Infinity
        let score = 0
        for (const word of words) {
          const n = counts[s]!.get(word) ?? 0
          if (n) score += rarity(word) * n * (K + 1) / (n + K * (1 - B + B * document.length / mean))
        }
        return score
      })
    }),
    operations: session.cues.map((cue) => {
      const words = stemsOf(cue.text)
      return new Map(OPERATIONS.map(([operation, of]) => [operation, words.filter(word => of.has(word)).length]))
    }),
  }
}

const best = <Key>(entries: Iterable<readonly [Key, number]>): [Key, number] | null => {
  let found: [Key, number] | null = null
  for (const [key, value] of entries) if (!found || value > found[1]) found = [key, value]
  return found
}

function chaptersFrom(session: LabelledSession, states: { step: number | null, operation: Operation }[]): ProposedChapter[] {
  const chapters: ProposedChapter[] = []
  states.forEach((state, i) => {
    const startMs = i ? session.cues[i]!.startMs : 0
    const last = chapters.at(-1)
    if (last && last.step === state.step && last.operation === state.operation) return
    if (last) last.endMs = startMs
    chapters.push({ startMs, endMs: session.truth.durationMs, ...state })
  })
  return chapters
}

/** Every cue for itself: the step and operation with the most of its words; none when it has none. */
export function plainBm25(session: LabelledSession, ticked: ReadonlySet<number> | null): ProposedChapter[] {
  const { steps, operations } = scoresOf(session, ticked ?? new Set(session.steps.map(step => step.number)))
  return chaptersFrom(session, session.cues.map((_, i) => {
    const step = best([...steps[i]!].map((score, s) => [session.steps[s]!.number, score] as const))
    const operation = best(operations[i]!)
    return step && step[1] > 0 ? { step: step[0], operation: operation && operation[1] > 0 ? operation[0] : 'plan-talk' } : { step: null, operation: 'none' }
  }))
}

/** The same scores with a price on every change of step (Viterbi), a lower one towards the next step; operation by majority. */
export function simpleViterbi(session: LabelledSession, ticked: ReadonlySet<number> | null): ProposedChapter[] {
  const { steps, operations } = scoresOf(session, ticked ?? new Set(session.steps.map(step => step.number)))
  const S = session.steps.length
  const NONE = S
  let at = new Float64Array(S + 1)
  const back: Int32Array[] = []
  session.cues.forEach((_, i) => {
    const next = new Float64Array(S + 1).fill(-Infinity)
    const from = new Int32Array(S + 1)
    const top = best(at.entries())!
    for (let s = 0; s <= S; s++) {
      let value = at[s]!
      from[s] = s
      const jump = top[1] - 8
      if (jump > value) {
        value = jump
        from[s] = top[0]
      }
      if (s > 0 && s < S && at[s - 1]! - 5 > value) {
        value = at[s - 1]! - 5
        from[s] = s - 1
      }
      next[s] = value + (s === NONE ? 0.4 : steps[i]![s]!)
    }
    back.push(from)
    at = next
  })
  const path: number[] = []
  let state = best(at.entries())![0]
  for (let i = session.cues.length - 1; i >= 0; i--) {
    path[i] = state
    state = back[i]![state]!
  }
  const states = path.map(s => ({ step: s === NONE ? null : session.steps[s]!.number }))
  return chaptersFrom(session, states.map(({ step }, i) => {
    if (step === null) return { step, operation: 'none' as const }
    let a = i
    let b = i
    while (a > 0 && states[a - 1]!.step === step) a--
    while (b < states.length - 1 && states[b + 1]!.step === step) b++
    // The operation heard most within a minute of here.
    const sums = new Map<Operation, number>()
    for (let j = Math.max(a, i - 10); j <= Math.min(b, i + 10); j++) for (const [operation, n] of operations[j]!) sums.set(operation, (sums.get(operation) ?? 0) + n)
    return { step, operation: best(sums)![0] }
  }))
}
