import { sql } from 'drizzle-orm'
import type { Holdings } from '#shared/types/holdings'
import type { Executor } from '../database/client'

/** What hangs on a build, a session or a clip: counted before it is deleted, so that the builder knows what goes. */
export async function countHoldings(executor: Executor, subject: 'build' | 'session' | 'clip', id: string): Promise<Holdings> {
  const mine = { build: sql`c.build_id = ${id}`, session: sql`c.session_id = ${id}`, clip: sql`c.id = ${id}` }[subject]
  const { rows: [row] } = await executor.execute<Holdings & Record<string, unknown>>(sql`
    with mine as (select c.id, c.duration_ms from clips c where ${mine})
    select
      ${subject === 'build' ? sql`(select count(*) from sessions where build_id = ${id})::int` : sql`0`} sessions,
      ${subject === 'clip' ? sql`0` : sql`(select count(*) from mine)::int`} clips,
      coalesce((select sum(duration_ms) from mine), 0)::float8 "footageMs",
      chapters.n::int chapters, chapters.inked::int inked, captions.n::int captions, captions.corrected::int corrected
    from
      (select count(*) n, count(*) filter (where inking = 'inked') inked from chapters where clip_id in (select id from mine)) chapters,
      (select count(*) n, count(original_text) corrected from cues where clip_id in (select id from mine)) captions`)
  return row!
}
