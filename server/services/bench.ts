import { and, asc, desc, eq, inArray, isNull, ne, sql } from 'drizzle-orm'
import type { BenchClip, BenchStep, BenchView } from '#shared/types/bench'
import type { Role } from '#shared/types/trade'
import type { Executor } from '../database/client'
import { openPickups } from './pickups'
import { type Build, chapters, clips, clipTasks, sessions, steps } from '../database/schema'

/** Lines of each list; the bench says what is next, not everything. */
const LINES = 5
/** Gaps between chapters shorter than this are breath, not footage to be tagged, ms. */
const SHORTEST_GAP_MS = 5_000

/** What waits on a build: for crew and builder. */
export async function readBench(executor: Executor, build: Build, role: Role): Promise<BenchView> {
  const plan = await readSteps(executor, build.id)
  const unfilmed = plan.filter(step => !step.filmed && step.status !== 'to-do')
  return {
    build: { id: build.id, name: build.name, boat: build.boat, address: build.address, visibility: build.visibility },
    role,
    counts: await readCounts(executor, build.id),
    indexing: await readIndexing(executor, build.id),
    untagged: await readUntagged(executor, build.id),
    pencilled: await readPencilled(executor, build.id),
    pickups: await readPickups(executor, build.id),
    unfilmed: { shown: plan.filter(step => step.filmed).length, steps: unfilmed.slice(0, LINES * 2).map(toStep) },
    next: [...plan.filter(step => step.status === 'under-way'), ...plan.filter(step => step.status === 'to-do')].slice(0, LINES).map(toStep),
    sessions: await readSessions(executor, build.id),
  }
}

async function readCounts(executor: Executor, buildId: string): Promise<BenchView['counts']> {
  const { rows } = await executor.execute<{ steps: number, sessions: number, clips: number, chapters: number }>(sql`select
    (select count(*)::int from ${steps} where build_id = ${buildId} and archived_at is null) as steps,
    (select count(*)::int from ${sessions} where build_id = ${buildId}) as sessions,
    (select count(*)::int from ${clips} where build_id = ${buildId}) as clips,
    (select count(*)::int from ${chapters} where build_id = ${buildId}) as chapters`)
  return rows[0]!
}

async function readIndexing(executor: Executor, buildId: string): Promise<BenchClip[]> {
  const rows = await executor.select({ id: clips.id, name: clips.name, sessionId: clips.sessionId, state: clips.state, failure: clips.failure }).from(clips)
    .where(and(eq(clips.buildId, buildId), ne(clips.state, 'ready'))).orderBy(sql`${clips.state} = 'failed' desc`, desc(clips.createdAt)).limit(LINES * 2)
  if (!rows.length) return []
  const tasks = await executor.select().from(clipTasks).where(inArray(clipTasks.clipId, rows.map(row => row.id)))
  return rows.map(({ failure, ...clip }) => {
    const own = tasks.filter(task => task.clipId === clip.id).map(({ task, state, progress, message }) => ({ task, state, progress, message }))
    return { ...clip, state: clip.state as BenchClip['state'], message: failure?.message ?? own.find(task => task.state === 'working')?.message ?? '', progress: own.length ? own.reduce((sum, task) => sum + (task.state === 'done' ? 1 : task.progress), 0) / own.length : 0, tasks: own }
  })
}

/** The gaps that chapters leave in each clip, by one pass over chapters in time order. */
async function readUntagged(executor: Executor, buildId: string): Promise<BenchView['untagged']> {
  const { rows } = await executor.execute<{ clip_id: string, name: string, session_id: string, date: string, start_ms: number, end_ms: number, clips: number, total: number }>(sql`
    with edges as (
      select id as clip_id, 0 as from_ms, 0 as to_ms from ${clips} where build_id = ${buildId} and state = 'ready' and duration_ms > 0
      union all select clip_id, start_ms, end_ms from ${chapters} where build_id = ${buildId}
    ), gaps as (
      select e.clip_id, k.name, k.session_id, e.to_ms as start_ms, coalesce(lead(e.from_ms) over (partition by e.clip_id order by e.from_ms, e.to_ms), k.duration_ms) as end_ms
      from edges e join ${clips} k on k.id = e.clip_id and k.state = 'ready'
    ), open as (select * from gaps where end_ms - start_ms >= ${SHORTEST_GAP_MS})
    select o.clip_id, o.name, o.session_id, s.date::text as date, o.start_ms, o.end_ms, (select count(distinct clip_id)::int from open) as clips, (select sum(end_ms - start_ms)::float8 from open) as total
    from open o join ${sessions} s on s.id = o.session_id order by o.end_ms - o.start_ms desc, o.clip_id, o.start_ms limit ${LINES}`)
  return {
    clips: rows[0]?.clips ?? 0, ms: rows[0]?.total ?? 0,
    longest: rows.map(row => ({ clipId: row.clip_id, clipName: row.name, sessionId: row.session_id, date: row.date, startMs: row.start_ms, endMs: row.end_ms })),
  }
}

async function readPencilled(executor: Executor, buildId: string): Promise<BenchView['pencilled']> {
  const pencilled = and(eq(chapters.buildId, buildId), eq(chapters.inking, 'pencilled'))
  const rows = await executor.select({
    clipId: chapters.clipId, clipName: clips.name, sessionId: chapters.sessionId, date: sessions.date, startMs: chapters.startMs, endMs: chapters.endMs,
    operation: chapters.operation, number: steps.number, title: steps.title, count: sql<number>`(count(*) over ())::int`,
  }).from(chapters).innerJoin(clips, eq(clips.id, chapters.clipId)).innerJoin(sessions, eq(sessions.id, chapters.sessionId)).leftJoin(steps, eq(steps.id, chapters.stepId))
    .where(pencilled).orderBy(desc(sessions.date), asc(clips.offsetMs), asc(chapters.startMs)).limit(LINES)
  return {
    count: rows[0]?.count ?? 0,
    first: rows.map(({ count: _, number, title, ...row }) => ({ ...row, step: number !== null && title !== null ? { number, title } : null })),
  }
}

async function readPickups(executor: Executor, buildId: string): Promise<BenchView['pickups']> {
  const open = await openPickups(executor, buildId)
  return { count: open.length, first: open.slice(0, LINES) }
}

// Columns in a selected subquery are named by hand: Drizzle leaves the table out where a query has only one.
async function readSteps(executor: Executor, buildId: string) {
  return executor.select({
    id: steps.id, number: steps.number, title: steps.title, stage: steps.stage, status: steps.status, plannedMinutes: steps.plannedMinutes,
    filmed: sql<boolean>`exists (select 1 from ${chapters} c where c.build_id = steps.build_id and c.step_id = steps.id)`,
  }).from(steps).where(and(eq(steps.buildId, buildId), isNull(steps.archivedAt))).orderBy(asc(steps.position))
}

async function readSessions(executor: Executor, buildId: string): Promise<BenchView['sessions']> {
  return executor.select({
    id: sessions.id, date: sessions.date, title: sessions.title, place: sessions.place,
    clips: sql<number>`(select count(*)::int from ${clips} k where k.session_id = sessions.id)`,
    durationMs: sql<number>`(select coalesce(sum(k.duration_ms), 0)::float8 from ${clips} k where k.session_id = sessions.id)`,
    chapters: sql<number>`(select count(*)::int from ${chapters} c where c.session_id = sessions.id)`,
  }).from(sessions).where(eq(sessions.buildId, buildId)).orderBy(desc(sessions.date), desc(sessions.createdAt)).limit(LINES)
}

function toStep({ filmed: _, ...step }: BenchStep & { filmed: boolean }): BenchStep {
  return step
}
