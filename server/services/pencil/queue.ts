import { and, eq, sql } from 'drizzle-orm'
import { addJob } from '../../adapters/queue'
import type { Executor, Transaction } from '../../database/client'
import { pencillings, sessions } from '../../database/schema'
import type { TaskState } from '#shared/types/trade'
import { announce } from '../live'

/** Writes how far the pencilling of a session is, and tells its pages. */
export async function setPencilling(executor: Executor, sessionId: string, state: TaskState, message = ''): Promise<void> {
  const row = { state, message: message.slice(0, 1000) }
  await executor.insert(pencillings).values({ sessionId, ...row }).onConflictDoUpdate({ target: pencillings.sessionId, set: { ...row, updatedAt: new Date() } })
  await announce(executor, { sessionId, kind: 'session', id: sessionId })
}

/**
 * Leaves the job that pencils a session. Call it in the transaction that changes what the program listens to: its
 * captions, their clips' order, or the steps that are ticked. Several calls before the job begins are one job.
 */
export async function enqueuePencilling(tx: Transaction, sessionId: string): Promise<void> {
  await setPencilling(tx, sessionId, 'waiting')
  await addJob(tx, 'suggest-chapters', { sessionId })
}

/** The same for every session of a build in which something is said: its plan has changed. */
export async function enqueuePencillingOfBuild(tx: Transaction, buildId: string): Promise<void> {
  const rows = await tx.select({ id: sessions.id }).from(sessions)
    .where(and(eq(sessions.buildId, buildId), sql`exists (select 1 from clips join cues on cues.clip_id = clips.id where clips.session_id = sessions.id)`)).orderBy(sessions.id)
  for (const { id } of rows) await enqueuePencilling(tx, id)
}

/** The end of a run, unless something has changed meanwhile and another run waits already. */
export async function settlePencilling(tx: Transaction, sessionId: string): Promise<void> {
  const [row] = await tx.update(pencillings).set({ state: 'done', message: '', updatedAt: new Date() }).where(and(eq(pencillings.sessionId, sessionId), eq(pencillings.state, 'working'))).returning({ id: pencillings.sessionId })
  if (row) await announce(tx, { sessionId, kind: 'session', id: sessionId })
}
