import { and, eq, isNull, sql } from 'drizzle-orm'
import type { SearchQuery } from '#shared/schemas/search'
import type { SearchAnswer, Understood } from '#shared/types/search'
import { DomainError } from '#shared/utils/errors'
import { OPERATION_LEXICON } from '../../indexing/lexicon/operations'
import { rank, type Ranked, spread } from '../../indexing/search/rank'
import { forgiven, nearest, type SpelledWord } from '../../indexing/search/spelling'
import type { Frequencies, SearchPlan, Spelling, Understanding } from '../../indexing/search/types'
import { understand, unknownWords } from '../../indexing/search/understand'
import { isStopWord, tokenise } from '../../indexing/words/tokenise'
import type { Database, Executor } from '../../database/client'
import { parts, stepParts, steps } from '../../database/schema'
import { requireBuild } from '../access'
import { type Filters, findCandidates, type FoundPassage, isHeard, readFrequencies, readLookalikes, type Seer, stemsAsked } from './finding'
import { insteadOf } from './instead'
import { groupsOf } from './moments'

/** Moments of one chapter in an answer; more would push out everything else. */
const MOST_OF_A_CHAPTER = 2

/**
 * Answers a question over one build (named in the query) or over every build the asker may see. Guests and
 * followers find inked chapters only; unlisted builds are found only when they are named.
 *
 * @param userId null for a guest
 * @throws DomainError `not-found` for a build that may not be seen, `bad-input` for a page that is none
 */
export async function search(database: Database, userId: string | null, query: SearchQuery): Promise<SearchAnswer> {
  return database.transaction(async (tx) => {
    // A scan of every passage is never the way, whatever the planner guesses of rare words; and no question may run for long.
    await tx.execute(sql`select set_config('enable_seqscan', 'off', true), set_config('statement_timeout', '4000', true)`)
    const role = query.build ? (await requireBuild(tx, userId, 'build', query.build, 'watch')).role : null
    const seer: Seer = query.build ? { inkedOnly: role !== 'builder' && role !== 'crew' } : { userId }
    const plan = query.build ? await readPlan(tx, query.build) : { steps: [], parts: [] }
    const spelling = await readSpelling(tx, query.q, plan, query.build)
    const question = understand(query.q, plan, spelling)
    const frequencies = await readFrequencies(tx, stemsAsked(question), query.build)
    const filters: Filters = { buildId: query.build, sessionId: query.session, stepId: query.step, partId: query.part, operation: query.operation, from: query.from, to: query.to }

    const found = question.concepts.length || query.step || query.part || query.operation ? await findCandidates(tx, question, frequencies, filters, seer) : []
    const ranked = thin(spread(rank(question, found, frequencies)))
    const start = startAfter(ranked, query.after)
    const page = ranked.slice(start, start + query.limit)
    const last = page.at(-1)
    return {
      question: query.q,
      understood: understoodAs(question, frequencies),
      groups: await groupsOf(tx, userId, question, page),
      count: page.length,
      next: last && start + page.length < ranked.length ? cursorOf(last) : null,
      instead: ranked.length === 0 && query.q ? await insteadOf(tx, { question, frequencies, filters, seer, plan }) : null,
    }
  }, { accessMode: 'read only' })
}

async function readPlan(executor: Executor, buildId: string): Promise<SearchPlan> {
  const [stepRows, partRows] = [
    await executor.select({
      id: steps.id, number: steps.number, title: steps.title, stage: steps.stage, description: steps.description, materials: steps.materials,
      parts: sql<string[]>`array(select ${parts.name} from ${stepParts} join ${parts} on ${parts.id} = ${stepParts.partId} where ${stepParts.stepId} = ${steps.id} order by ${parts.position})`,
    }).from(steps).where(and(eq(steps.buildId, buildId), isNull(steps.archivedAt))).orderBy(steps.position),
    await executor.select({ id: parts.id, name: parts.name, aliases: parts.aliases, material: parts.material }).from(parts).where(and(eq(parts.buildId, buildId), isNull(parts.archivedAt))).orderBy(parts.position),
  ]
  return { steps: stepRows, parts: partRows }
}

/** What words that nobody says were probably meant to be: words of the plan and the trade first, then words said in the build. */
async function readSpelling(executor: Executor, q: string, plan: SearchPlan, buildId: string | undefined): Promise<Spelling> {
  const unknown = unknownWords(q, plan)
  if (!unknown.length) return new Map()
  const said = await readFrequencies(executor, unknown.map(token => token.stem), buildId)
  const known = knownWords(plan)
  const spelling = new Map<string, string>()
  for (const token of unknown) {
    if (said.of.get(token.stem) || !forgiven(token.word)) continue
    // Four letters are near to too many others: only a word of the plan or the trade is read instead.
    const likely = nearest(token.word, token.word.length > 4 ? [...known, ...await readLookalikes(executor, token.stem, buildId)] : known)[0]
    if (likely) spelling.set(token.stem, likely.word)
  }
  return spelling
}

/** Words of the plan and of the trade, as words to be meant. They count as said often, being what people ask for. */
function knownWords(plan: SearchPlan): SpelledWord[] {
  const texts = [...plan.parts.flatMap(part => [part.name, ...part.aliases]), ...plan.steps.map(step => step.title), ...Object.values(OPERATION_LEXICON).map(words => words.plain)]
  const words = new Set(texts.flatMap(text => tokenise(text)).map(token => token.word).filter(word => !isStopWord(word)))
  return [...words].map(word => ({ word, count: 1_000_000 }))
}

function understoodAs(question: Understanding, frequencies: Frequencies): Understood {
  const named = question.concepts.map(concept => concept.kind === 'word' ? null : `${concept.kind === 'step' ? '' : `${concept.kind}: `}${concept.label}`)
  const readings = named.filter(label => label !== null)
  const summary = readings.length && question.rest.length ? [...readings, `words: ${question.rest.join(', ')}`] : readings
  return {
    summary: [...new Set(summary)].join(' · '),
    parts: question.parts, steps: question.steps, operations: question.operations, words: question.rest, corrections: question.corrections,
    unheard: question.concepts.filter(concept => !isHeard(concept, frequencies)).map(concept => concept.label),
  }
}

/**
 * Keeps the best few moments of each chapter, one where only its tags answer, and one of several caption
 * files that say the same at the same time.
 */
function thin(ranked: Ranked<FoundPassage>[]): Ranked<FoundPassage>[] {
  const chapters = new Map<string, number>()
  const shown = new Map<string, Ranked[]>()
  return ranked.filter((moment) => {
    const { candidate, line } = moment
    const beside = shown.get(candidate.clipId) ?? []
    if (beside.some(other => other.candidate.startMs < candidate.endMs && candidate.startMs < other.candidate.endMs)) return false
    if (candidate.chapter) {
      const count = chapters.get(candidate.chapter.id) ?? 0
      if (count >= MOST_OF_A_CHAPTER || (count > 0 && line === -1)) return false
      chapters.set(candidate.chapter.id, count + 1)
    }
    shown.set(candidate.clipId, [...beside, moment])
    return true
  })
}

/** A page begins after the score and passage that the one before ended with, whatever has come or gone since. */
function startAfter(ranked: Ranked[], after: string | undefined): number {
  if (!after) return 0
  const [score, id] = Buffer.from(after, 'base64url').toString().split(' ')
  if (!id || !Number.isFinite(Number(score))) throw new DomainError('bad-input', 'That page of results cannot be found. Search again from the start.')
  const same = ranked.findIndex(moment => moment.candidate.id === id)
  if (same !== -1) return same + 1
  const next = ranked.findIndex(moment => moment.score < Number(score))
  return next === -1 ? ranked.length : next
}

function cursorOf(moment: Ranked): string {
  return Buffer.from(`${moment.score} ${moment.candidate.id}`).toString('base64url')
}
