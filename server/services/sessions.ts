import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm'
import type { NewSession, SessionChanges } from '#shared/schemas/sessions'
import type { SessionDetail, SessionSummary, TrackView } from '#shared/types/session'
import { DomainError, notFound } from '#shared/utils/errors'
import { addJob } from '../adapters/queue'
import type { Database, Executor, Transaction } from '../database/client'
import { captionTracks, clips, clipTasks, pencillings, sessions, sessionSteps, steps } from '../database/schema'
import type { BuildAccess } from './access'
import { dropClip } from './clips'
import { toClipView } from './clipView'
import { announce } from './live'
import { trackPrefix } from './objectKeys'
import { enqueuePencilling } from './pencil/queue'

/** A build's sessions, newest first, with what each holds. */
export async function listSessions(executor: Executor, buildId: string): Promise<SessionSummary[]> {
  const { rows } = await executor.execute<SessionSummary & Record<string, unknown>>(sql`
    select s.id, s.date::text, s.title, s.place,
      coalesce(c.clips, 0)::int "clipCount", coalesce(c.footage, 0)::float8 "footageMs",
      coalesce(c.uploading, 0)::int uploading, coalesce(c.working, 0)::int working, coalesce(c.failed, 0)::int failed,
      coalesce(h.chaptered, 0)::float8 "chapteredMs", coalesce(h.inked, 0)::float8 "inkedMs",
      (select count(*) from caption_tracks t where t.session_id = s.id and t.clip_id is null)::int "captionsWaiting",
      coalesce((select array_agg(p.number order by p.position) from session_steps ss join steps p on p.id = ss.step_id where ss.session_id = s.id), '{}') "stepNumbers"
    from sessions s
    left join lateral (
      select count(*) clips, sum(duration_ms) footage, count(*) filter (where state = 'uploading') uploading,
        count(*) filter (where state in ('waiting', 'working')) working, count(*) filter (where state = 'failed') failed
      from clips where session_id = s.id) c on true
    left join lateral (
      select sum(end_ms - start_ms) chaptered, sum(end_ms - start_ms) filter (where inking = 'inked') inked
      from chapters where session_id = s.id) h on true
    where s.build_id = ${buildId}
    order by s.date desc, s.created_at desc`)
  return rows
}

export async function createSession(database: Database, buildId: string, input: NewSession): Promise<{ id: string }> {
  const { stepIds, ...facts } = input
  return database.transaction(async (tx) => {
    const [session] = await tx.insert(sessions).values({ buildId, ...facts }).returning({ id: sessions.id })
    await tickSteps(tx, buildId, session!.id, stepIds)
    return session!
  })
}

/** Last write wins: a session's facts are few, and one person writes them down. */
export async function updateSession(database: Database, sessionId: string, userId: string, changes: SessionChanges): Promise<void> {
  const { stepIds, ...facts } = changes
  await database.transaction(async (tx) => {
    const [session] = await tx.update(sessions).set({ ...facts, updatedAt: new Date() }).where(eq(sessions.id, sessionId)).returning({ buildId: sessions.buildId })
    if (!session) throw notFound('That session')
    if (stepIds) {
      await tx.delete(sessionSteps).where(eq(sessionSteps.sessionId, sessionId))
      await tickSteps(tx, session.buildId, sessionId, stepIds)
      await enqueuePencilling(tx, sessionId)
    }
    await announce(tx, { sessionId, kind: 'session', id: sessionId, by: userId })
  })
}

async function tickSteps(tx: Transaction, buildId: string, sessionId: string, stepIds: string[]): Promise<void> {
  const wanted = [...new Set(stepIds)]
  if (!wanted.length) return
  const found = await tx.select({ id: steps.id }).from(steps).where(and(eq(steps.buildId, buildId), inArray(steps.id, wanted)))
  if (found.length !== wanted.length) {
    throw new DomainError('bad-input', 'A ticked step is not in this build’s plan any more. Reload the page to see the plan as it is. Nothing was changed.', { issues: [{ path: 'stepIds', message: 'A ticked step is not in the plan any more' }] })
  }
  await tx.insert(sessionSteps).values(wanted.map(stepId => ({ sessionId, stepId })))
}

/** Removes a session with its clips, captions and chapters; stored objects follow by jobs. */
export async function deleteSession(database: Database, sessionId: string, userId: string): Promise<void> {
  await database.transaction(async (tx) => {
    const [session] = await tx.select().from(sessions).where(eq(sessions.id, sessionId)).for('update')
    if (!session) throw notFound('That session')
    for (const clip of await tx.select().from(clips).where(eq(clips.sessionId, sessionId))) await dropClip(tx, clip)
    for (const track of await tx.select({ id: captionTracks.id }).from(captionTracks).where(eq(captionTracks.sessionId, sessionId))) {
      await addJob(tx, 'remove-objects', { prefix: trackPrefix(track.id) })
    }
    await tx.delete(sessions).where(eq(sessions.id, sessionId))
    await announce(tx, { sessionId, kind: 'session', id: sessionId, by: userId })
  })
}

/** All that the session page shows except cues and chapters, which are longer and change on their own. */
export async function readSession(executor: Executor, sessionId: string, { build, role }: BuildAccess): Promise<SessionDetail> {
  const [session] = await executor.select().from(sessions).where(eq(sessions.id, sessionId))
  if (!session || !role) throw notFound('That session')
  const [ticked, clipRows, taskRows, tracks, [pencilling]] = await Promise.all([
    executor.select({ stepId: sessionSteps.stepId }).from(sessionSteps).innerJoin(steps, eq(steps.id, sessionSteps.stepId)).where(eq(sessionSteps.sessionId, sessionId)).orderBy(asc(steps.position)),
    executor.select().from(clips).where(eq(clips.sessionId, sessionId)).orderBy(asc(clips.offsetMs), asc(clips.name)),
    executor.select({ row: clipTasks }).from(clipTasks).innerJoin(clips, eq(clips.id, clipTasks.clipId)).where(eq(clips.sessionId, sessionId)),
    listTracks(executor, sessionId),
    executor.select({ state: pencillings.state, message: pencillings.message }).from(pencillings).where(eq(pencillings.sessionId, sessionId)),
  ])
  const { id, date, title, place, temperatureC, humidityPercent, notes } = session
  return {
    id, date, title, place, temperatureC, humidityPercent, notes, role,
    build: { id: build.id, name: build.name, address: build.address, units: build.units },
    stepIds: ticked.map(row => row.stepId),
    clips: clipRows.map(clip => toClipView(clip, taskRows.flatMap(({ row }) => row.clipId === clip.id ? [row] : []))),
    tracks,
    pencilling: pencilling ?? null,
  }
}

async function listTracks(executor: Executor, sessionId: string): Promise<TrackView[]> {
  return executor.select({
    id: captionTracks.id, clipId: captionTracks.clipId, name: captionTracks.name, language: captionTracks.language,
    embedded: sql<boolean>`${captionTracks.embeddedStream} is not null`,
    // Written out: in a select from one table Drizzle leaves the table's name off, and "id" would be the caption's.
    cueCount: sql<number>`(select count(*)::int from cues where cues.track_id = caption_tracks.id)`,
    doubt: sql<string | null>`case when ${captionTracks.kept} then null else ${captionTracks.doubt} end`,
    warnings: captionTracks.warnings, failure: captionTracks.failure, read: captionTracks.read,
  }).from(captionTracks).where(eq(captionTracks.sessionId, sessionId)).orderBy(asc(captionTracks.name), desc(captionTracks.createdAt))
}
