import { sql, type SQL } from 'drizzle-orm'
import type { Inking, Operation } from '#shared/types/trade'
import type { Candidate } from '../../indexing/search/rank'
import { weightOfConcept } from '../../indexing/search/rarity'
import type { Concept, Frequencies, Understanding } from '../../indexing/search/types'
import type { Executor } from '../../database/client'
import { builds, chapterParts, chapters, clips, memberships, passages, sessions } from '../../database/schema'

/** Passages read for ranking, whatever the question: what keeps the worst question cheap. */
const MOST_CANDIDATES = 200
/** A stricter reading that finds this many needs no looser one. */
const ENOUGH = 20
/** Passages of one concept beyond which it is too common to be searched for by itself. */
const MOST_LOOSE = 4_000

export interface Filters { buildId?: string, sessionId?: string, stepId?: string, partId?: string, operation?: Operation, from?: string, to?: string }
/** Who asks: `inkedOnly` on one build, or an account (null: guest) over all builds. */
export type Seer = { inkedOnly: boolean } | { userId: string | null }

export interface FoundPassage extends Candidate { buildId: string, sessionId: string }

/**
 * Candidates for ranking, strictest reading first: everything asked for and tagged so, everything said or
 * tagged, then without the commonest concept, and so on down to the rarest alone. Each reading is bounded.
 */
export async function findCandidates(executor: Executor, question: Understanding, frequencies: Frequencies, filters: Filters, seer: Seer): Promise<FoundPassage[]> {
  const found = new Map<string, FoundPassage>()
  for (const query of readings(question, frequencies, filters, seer)) {
    const left = MOST_CANDIDATES - found.size
    for (const row of await findWith(executor, query, filters, seer, Math.min(left + found.size, MOST_CANDIDATES))) found.set(row.id, row)
    if (found.size >= MOST_CANDIDATES || (found.size >= ENOUGH && query.whole)) break
  }
  return [...found.values()].slice(0, MOST_CANDIDATES)
}

/** True when anything at all would be found. */
export async function findsAnything(executor: Executor, question: Understanding, frequencies: Frequencies, filters: Filters, seer: Seer): Promise<boolean> {
  for (const query of readings(question, frequencies, filters, seer)) {
    if ((await findWith(executor, query, filters, seer, 1)).length) return true
  }
  return false
}

interface Reading { text: string, /** Every concept is in it, by word or tag. */ whole: boolean }

/** The question as PostgreSQL text queries. Lexemes are quoted: nothing typed is ever query syntax. */
export function readings(question: Understanding, frequencies: Frequencies, filters: Filters, seer: Seer): Reading[] {
  const always = [
    ...filters.buildId ? [lexeme(`b:${filters.buildId}`)] : [],
    ...filters.stepId ? [lexeme(`s:${filters.stepId}`)] : [],
    ...filters.partId ? [lexeme(`p:${filters.partId}`)] : [],
    ...filters.operation ? [lexeme(`o:${filters.operation}`)] : [],
    ...('inkedOnly' in seer ? seer.inkedOnly : seer.userId === null) ? [lexeme('i:1')] : [],
  ]
  const rarestFirst = question.concepts
    .map(concept => ({ said: saidQuery(concept), tagged: tagQuery(concept), weight: weightOfConcept(concept, frequencies), heard: isHeard(concept, frequencies), count: countOf(concept, frequencies) }))
    .filter(concept => concept.said || concept.tagged)
    // A word that nobody says is the first to be let go, however telling it would be.
    .sort((a, b) => Number(b.heard) - Number(a.heard) || b.weight - a.weight)
  const join = (terms: (string | null)[]) => [...always, ...terms.filter(term => term !== null)].join(' & ')
  const any = (concept: typeof rarestFirst[number]) => either([concept.said, concept.tagged])
  if (!rarestFirst.length) return always.length ? [{ text: join([]), whole: true }] : []
  const telling = rarestFirst.filter(concept => concept.said && concept.count > 0 && concept.count <= MOST_LOOSE)
  const list: Reading[] = [
    { text: join(rarestFirst.map(concept => concept.tagged ?? concept.said)), whole: false },
    ...rarestFirst.length === 1 && rarestFirst[0]!.tagged && rarestFirst[0]!.said ? [{ text: join([rarestFirst[0]!.tagged, rarestFirst[0]!.said]), whole: false }] : [],
    { text: join(rarestFirst.map(any)), whole: true },
    // Three readings more at most: a long question is not worth a long search.
    ...rarestFirst.slice(1).map((_, dropped) => ({ text: join(rarestFirst.slice(0, rarestFirst.length - 1 - dropped).map(any)), whole: true })).slice(-3),
    // Last, any of the telling words, while they are few enough to be looked through.
    ...rarestFirst.length > 2 && telling.length ? [{ text: join([either(telling.map(any))]), whole: true }] : [],
  ]
  return list.filter((reading, i) => list.findIndex(other => other.text === reading.text) === i)
}

/** False for a word that is neither said nor, as far as a word can tell, tagged. */
export function isHeard(concept: Concept, frequencies: Frequencies): boolean {
  return concept.kind !== 'word' || concept.ways.some(way => way.finds && way.stems.every(stem => frequencies.of.get(stem)))
}

/** Passages that say the concept, at most. */
function countOf(concept: Concept, frequencies: Frequencies): number {
  return concept.ways.filter(way => way.finds).reduce((sum, way) => sum + Math.min(...way.stems.map(stem => frequencies.of.get(stem) ?? 0)), 0)
}

function saidQuery(concept: Concept): string | null {
  const ways = concept.ways.filter(way => way.finds).slice(0, 40)
  return either(ways.map(way => way.stems.length === 1 ? lexeme(way.stems[0]!) : `(${way.stems.map(lexeme).join(' & ')})`))
}

function tagQuery(concept: Concept): string | null {
  return either(concept.tags.filter(tag => tag.weight >= 0.5).slice(0, 40).map(tag => lexeme(tag.lexeme)))
}

function either(terms: (string | null)[]): string | null {
  const filled = terms.filter(term => term !== null)
  return filled.length > 1 ? `(${filled.join(' | ')})` : filled[0] ?? null
}

/** A quoted lexeme of a text query; quotes and backslashes doubled as PostgreSQL asks. */
function lexeme(text: string): string {
  return `'${text.replaceAll('\\', '\\\\').replaceAll('\'', '\'\'')}'`
}

interface Row extends Record<string, unknown> {
  id: string
  build_id: string
  session_id: string
  clip_id: string
  track_id: string | null
  start_ms: number
  end_ms: number
  starts: number[]
  lines: string[]
  chapter_id: string | null
  chapter_start: number
  chapter_end: number
  step_id: string | null
  operation: Operation
  inking: Inking
  confidence: number | null
  part_ids: string[] | null
  tags: string | null
}

async function findWith(executor: Executor, reading: Reading, filters: Filters, seer: Seer, limit: number): Promise<FoundPassage[]> {
  const dated = filters.from || filters.to
    ? sql`and (p.session_id in (select d.id from ${sessions} d where true ${filters.from ? sql`and d.date >= ${filters.from}` : sql``} ${filters.to ? sql`and d.date <= ${filters.to}` : sql``})) is true`
    : sql``
  const inSession = filters.sessionId ? sql`and p.session_id = ${filters.sessionId}` : sql``
  // Passages are found and counted off by the text index alone; only those few are then joined and checked.
  const { rows } = await executor.execute<Row>(sql`
    select p.id, p.build_id, p.session_id, p.clip_id, p.track_id, p.start_ms, p.end_ms, p.starts, p.lines,
      c.id as chapter_id, c.start_ms as chapter_start, c.end_ms as chapter_end, c.step_id, c.operation, c.inking, c.confidence,
      case when c.id is not null then array(select part_id::text from ${chapterParts} where chapter_id = c.id) end as part_ids,
      case when c.id is not null then p.lexemes::text end as tags
    from (select * from ${passages} p where p.lexemes @@ ${reading.text}::tsquery and ${maySee(seer)} ${dated} ${inSession} limit ${limit}) p
    left join ${chapters} c on c.id = p.chapter_id
    where ${stillMaySee(seer)}`)
  return rows.map(row => ({
    id: row.id, buildId: row.build_id, sessionId: row.session_id, clipId: row.clip_id, trackId: row.track_id,
    startMs: row.start_ms, endMs: row.end_ms, starts: row.starts, lines: row.lines,
    chapter: row.chapter_id ? { id: row.chapter_id, startMs: row.chapter_start, endMs: row.chapter_end, stepId: row.step_id, operation: row.operation, inking: row.inking, confidence: row.confidence, partIds: row.part_ids ?? [] } : null,
    tagStems: new Set(Array.from(row.tags?.matchAll(/'t:([^']*)'/g) ?? [], match => match[1]!)),
  }))
}

/**
 * Which passages are whose, by memberships as they stand. `is true` keeps the planner from going through
 * passages build by build where it takes words for commoner than they are.
 */
function maySee(seer: Seer): SQL {
  if ('inkedOnly' in seer) return sql`true`
  const open = sql`select b.id from ${builds} b where b.visibility = 'public'`
  if (!seer.userId) return sql`(p.build_id in (${open})) is true`
  const mine = (roles: SQL) => sql`select m.build_id from ${memberships} m where m.user_id = ${seer.userId} ${roles}`
  return sql`((p.build_id in (${mine(sql`and m.role in ('builder', 'crew')`)})) is true
    or (p.lexemes @@ ${lexeme('i:1')}::tsquery and (p.build_id in (${open} union all ${mine(sql``)})) is true))`
}

/** What is published is decided on chapters and clips as they stand, not on what the index remembers of them. */
function stillMaySee(seer: Seer): SQL {
  // Under an inked chapter, and still within it: a chapter may have been drawn in since.
  const published = sql`(c.inking = 'inked' and p.start_ms >= c.start_ms and p.start_ms < c.end_ms and exists (select 1 from ${clips} k where k.id = p.clip_id and k.state = 'ready'))`
  if ('inkedOnly' in seer) return seer.inkedOnly ? published : sql`true`
  if (!seer.userId) return published
  return sql`(${published} or exists (select 1 from ${memberships} m where m.build_id = p.build_id and m.user_id = ${seer.userId} and m.role in ('builder', 'crew')))`
}

/** How often each stem of the question is said: in one build, or everywhere. */
export async function readFrequencies(executor: Executor, stems: string[], buildId: string | undefined): Promise<Frequencies> {
  const { rows } = await executor.execute<{ stem: string, n: number }>(sql`
    select stem, sum(passages)::int as n from search_words
    where stem = any(${sql.param([...new Set(['', ...stems])])}::text[]) ${buildId ? sql`and build_id = ${buildId}` : sql``} group by stem`)
  const of = new Map(rows.map(row => [row.stem, row.n]))
  return { passages: of.get('') ?? 0, of }
}

/**
 * Words said in the build (or anywhere) that look like the one typed. All begin with its letter, as `nearest`
 * asks, which leaves few to be compared.
 */
export async function readLookalikes(executor: Executor, stem: string, buildId: string | undefined): Promise<{ word: string, count: number }[]> {
  // A stem begins with a letter or digit: nothing in it is a pattern of LIKE.
  const begins = `${stem[0]}%`
  const { rows } = await executor.execute<{ word: string, n: number }>(buildId
    ? sql`select word, passages as n from search_words where build_id = ${buildId} and stem like ${begins} and passages > 0
        and length(stem) between ${stem.length - 3} and ${stem.length + 3} and similarity(stem, ${stem}) > 0.15
        order by similarity(stem, ${stem}) desc, passages desc limit 40`
    : sql`select word, sum(passages)::int as n from search_words where stem % ${stem} and stem like ${begins} and passages > 0 group by word order by max(similarity(stem, ${stem})) desc limit 40`)
  return rows.map(row => ({ word: row.word, count: row.n }))
}

/** All stems whose frequency a question needs. */
export function stemsAsked(question: Understanding): string[] {
  return [...new Set(question.concepts.flatMap(concept => concept.ways.filter(way => way.finds).flatMap(way => way.stems)))]
}
