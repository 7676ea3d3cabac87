import { sql } from 'drizzle-orm'
import type { SearchInstead } from '#shared/types/search'
import { OPERATION_WORDS } from '#shared/utils/operations'
import { alike, nearest } from '../../indexing/search/spelling'
import type { Frequencies, SearchPlan, Understanding } from '../../indexing/search/types'
import { stemOf } from '../../indexing/words/tokenise'
import type { Executor } from '../../database/client'
import { builds, chapterParts, chapters, parts } from '../../database/schema'
import { type Filters, findsAnything, readLookalikes, type Seer } from './finding'

/** Suggestions of each sort; more than a few are not read. */
const MOST = 4

/** What to try when nothing was found: words that are said and look alike, filters to drop, questions with an answer. */
export async function insteadOf(executor: Executor, asked: { question: Understanding, frequencies: Frequencies, filters: Filters, seer: Seer, plan: SearchPlan }): Promise<SearchInstead> {
  const { question, frequencies, filters, seer, plan } = asked
  const near: SearchInstead['nearest'] = []
  for (const typed of question.rest.slice(0, MOST)) {
    const lookalikes = await readLookalikes(executor, stemOf(typed), filters.buildId)
    const planWords = plan.parts.map(part => ({ word: part.name, count: 1 }))
    const words = nearest(typed, [...lookalikes, ...planWords], alike(typed)).slice(0, MOST).map(entry => entry.word)
    if (words.length) near.push({ typed, words })
  }
  const narrowed: [SearchInstead['drop'][number], Filters][] = [
    ...filters.stepId ? [['step', { ...filters, stepId: undefined }] as [SearchInstead['drop'][number], Filters]] : [],
    ...filters.partId ? [['part', { ...filters, partId: undefined }] as [SearchInstead['drop'][number], Filters]] : [],
    ...filters.operation ? [['operation', { ...filters, operation: undefined }] as [SearchInstead['drop'][number], Filters]] : [],
    ...filters.from || filters.to ? [['date', { ...filters, from: undefined, to: undefined }] as [SearchInstead['drop'][number], Filters]] : [],
  ]
  const drop: SearchInstead['drop'] = []
  for (const [name, without] of narrowed) {
    if (await findsAnything(executor, question, frequencies, without, seer)) drop.push(name)
  }
  return { nearest: near, drop, examples: await examplesFor(executor, filters.buildId) }
}

/** Questions that inked chapters answer, of one build or of public ones. */
export async function examplesFor(executor: Executor, buildId: string | undefined): Promise<string[]> {
  const { rows } = await executor.execute<{ name: string, operation: keyof typeof OPERATION_WORDS }>(sql`
    select name, operation from (
      select distinct on (p.id) p.name, c.operation, c.end_ms - c.start_ms as length
      from ${chapters} c join ${chapterParts} cp on cp.chapter_id = c.id join ${parts} p on p.id = cp.part_id
      where c.inking = 'inked' and c.operation not in ('none', 'plan-talk', 'clean-up')
        and ${buildId ? sql`c.build_id = ${buildId}` : sql`c.build_id in (select id from ${builds} where visibility = 'public' order by updated_at desc limit 5)`}
      order by p.id, length desc
    ) shown order by length desc, name limit ${MOST}`)
  return rows.map(row => `how was the ${row.name} ${OPERATION_WORDS[row.operation].done}`)
}
