import { and, asc, desc, eq } from 'drizzle-orm'
import type { PickupChanges } from '#shared/schemas/facts'
import type { OpenPickup, PickupView } from '#shared/types/facts'
import { DomainError, notFound } from '#shared/utils/errors'
import type { Database, Executor } from '../database/client'
import { clips, pickups, sessions, steps } from '../database/schema'
import { announce } from './live'
import { requireStepOf } from './plan'

const columns = {
  id: pickups.id, sessionId: pickups.sessionId, clipId: pickups.clipId, atMs: pickups.atMs, stepId: pickups.stepId, words: pickups.words,
  state: pickups.state, proposed: pickups.proposed, version: pickups.version,
}

/** What was said to have been done off camera, in the order in which it was said. */
export async function listPickups(executor: Executor, sessionId: string): Promise<PickupView[]> {
  return executor.select(columns).from(pickups).innerJoin(clips, eq(clips.id, pickups.clipId))
    .where(eq(pickups.sessionId, sessionId)).orderBy(asc(clips.offsetMs), asc(clips.id), asc(pickups.atMs), asc(pickups.id))
}

/** A build's shots that are still to be filmed, of the newest session first. */
export async function openPickups(executor: Executor, buildId: string): Promise<OpenPickup[]> {
  const rows = await executor.select({ ...columns, date: sessions.date, number: steps.number, title: steps.title }).from(pickups).innerJoin(clips, eq(clips.id, pickups.clipId)).innerJoin(sessions, eq(sessions.id, pickups.sessionId)).leftJoin(steps, eq(steps.id, pickups.stepId))
    .where(and(eq(pickups.buildId, buildId), eq(pickups.state, 'open'))).orderBy(desc(sessions.date), asc(clips.offsetMs), asc(pickups.atMs), asc(pickups.id))
  return rows.map(({ number, title, ...row }) => ({ ...row, step: number !== null && title !== null ? { number, title } : null }))
}

/**
 * Says that a pick-up is filmed, not wanted or still open, or that it is of another step. From then on the program leaves it alone.
 * @throws DomainError `conflict` with `data.current` when somebody was quicker
 */
export async function changePickup(database: Database, pickupId: string, userId: string, { version, ...changes }: PickupChanges): Promise<PickupView> {
  return database.transaction(async (tx) => {
    const [row] = await tx.select().from(pickups).where(eq(pickups.id, pickupId)).for('update')
    if (!row) throw notFound('That pick-up')
    if (row.version !== version) {
      const [current] = await tx.select(columns).from(pickups).where(eq(pickups.id, pickupId))
      throw new DomainError('conflict', 'This pick-up was changed meanwhile, so yours was not saved. It is shown as it now is.', { current })
    }
    if (changes.stepId) await requireStepOf(tx, row.buildId, changes.stepId)
    const [changed] = await tx.update(pickups).set({ ...changes, proposed: changes.proposed ?? false, version: version + 1, updatedBy: userId }).where(eq(pickups.id, pickupId)).returning(columns)
    await announce(tx, { sessionId: row.sessionId, kind: 'pickup', id: pickupId, by: userId })
    return changed!
  })
}
