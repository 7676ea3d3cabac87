import { and, asc, eq, sql } from 'drizzle-orm'
import type { FactChanges } from '#shared/schemas/facts'
import type { FactView } from '#shared/types/facts'
import { mayChange } from '#shared/utils/chapters/rights'
import { DomainError, notFound } from '#shared/utils/errors'
import type { Database, Executor } from '../database/client'
import { clips, facts, sessions, users } from '../database/schema'
import type { ChapterHand } from './chapters'
import { announce } from './live'
import { requireStepOf } from './plan'

const columns = {
  id: facts.id, sessionId: facts.sessionId, clipId: facts.clipId, atMs: facts.atMs, stepId: facts.stepId, kind: facts.kind, said: facts.said, value: facts.value, unit: facts.unit,
  inking: facts.inking, proposed: facts.proposed, version: facts.version, inkedBy: { id: users.id, name: users.name },
}

/** What is said to measure, mix or count, in the order in which it was said; without what people have deleted. */
export async function listFacts(executor: Executor, where: { sessionId: string } | { buildId: string }): Promise<FactView[]> {
  return executor.select(columns).from(facts)
    .innerJoin(clips, eq(clips.id, facts.clipId)).innerJoin(sessions, eq(sessions.id, facts.sessionId)).leftJoin(users, eq(users.id, facts.inkedBy))
    .where(and('sessionId' in where ? eq(facts.sessionId, where.sessionId) : eq(facts.buildId, where.buildId), eq(facts.dismissed, false)))
    .orderBy(asc(sessions.date), asc(clips.offsetMs), asc(clips.id), asc(facts.atMs), asc(facts.id))
}

/**
 * Changes a fact: inks it, mends it, deletes it or takes such a change back. From then on the program leaves it alone.
 *
 * @throws DomainError `conflict` with `data.current` when somebody was quicker; `forbidden` when it is another person's ink
 */
export async function changeFact(database: Database, factId: string, hand: ChapterHand, { version, ...changes }: FactChanges): Promise<FactView> {
  return database.transaction(async (tx) => {
    const [row] = await tx.select().from(facts).where(eq(facts.id, factId)).for('update')
    if (!row) throw notFound('That fact')
    const [inker] = row.inkedBy ? await tx.select({ id: users.id, name: users.name }).from(users).where(eq(users.id, row.inkedBy)) : []
    if (!mayChange({ inking: row.inking, inkedBy: inker ?? null }, hand)) throw new DomainError('forbidden', `${inker?.name ?? 'The builder'} has inked this. Crew change what is pencilled and what they inked themselves. Nothing was changed.`)
    if (row.version !== version) {
      throw new DomainError('conflict', 'This fact was changed meanwhile, so yours was not saved. It is shown as it now is.', { current: await readFact(tx, factId) })
    }
    if (changes.stepId) await requireStepOf(tx, row.buildId, changes.stepId)
    const inking = changes.inking ?? row.inking
    const inkedBy = inking === 'pencilled' ? null : row.inking === 'inked' ? row.inkedBy : hand.id
    await tx.update(facts).set({ ...changes, inking, inkedBy, proposed: changes.proposed ?? false, version: version + 1, updatedBy: hand.id }).where(eq(facts.id, factId))
    await announce(tx, { sessionId: row.sessionId, kind: 'fact', id: factId, by: hand.id })
    return (await readFact(tx, factId))!
  })
}

async function readFact(executor: Executor, id: string): Promise<FactView | undefined> {
  const [fact] = await executor.select(columns).from(facts).leftJoin(users, eq(users.id, facts.inkedBy)).where(eq(facts.id, id))
  return fact
}

/** Inked facts of a step that are said within published chapters: what the world may read. */
export async function publishedFacts(executor: Executor, stepId: string): Promise<Pick<FactView, 'id' | 'clipId' | 'atMs' | 'kind' | 'said' | 'value' | 'unit'>[]> {
  return executor.select({ id: facts.id, clipId: facts.clipId, atMs: facts.atMs, kind: facts.kind, said: facts.said, value: facts.value, unit: facts.unit }).from(facts)
    .innerJoin(clips, eq(clips.id, facts.clipId)).innerJoin(sessions, eq(sessions.id, facts.sessionId))
    .where(and(eq(facts.stepId, stepId), eq(facts.inking, 'inked'), eq(facts.dismissed, false), eq(clips.state, 'ready'),
      sql`exists (select 1 from chapters c where c.clip_id = ${facts.clipId} and c.inking = 'inked' and ${facts.atMs} >= c.start_ms and ${facts.atMs} < c.end_ms)`))
    .orderBy(asc(sessions.date), asc(clips.offsetMs), asc(facts.atMs), asc(facts.id))
}
