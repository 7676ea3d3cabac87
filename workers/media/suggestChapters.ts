import { eq } from 'drizzle-orm'
import { z } from 'zod'
import { pencillings, sessions } from '#server/database/schema'
import { pencilSession } from '#server/services/pencil/pencilSession'
import { settlePencilling, setPencilling } from '#server/services/pencil/queue'
import type { JobRun, WorkerContext } from './context'
import { giveUp, whyAgain } from './failures'

const payloadSchema = z.object({ sessionId: z.uuid() })

/**
 * Pencils a session: all its clips at once, in the order of its clock. Everything is written in one transaction with
 * the end of the task, so that a worker killed at any moment leaves either the state before or the state after; run
 * again it changes nothing.
 */
export async function suggestChapters({ database }: WorkerContext, payload: unknown, run: JobRun): Promise<void> {
  const { sessionId } = payloadSchema.parse(payload)
  const [session] = await database.select({ id: sessions.id }).from(sessions).where(eq(sessions.id, sessionId))
  if (!session) return
  await setPencilling(database, sessionId, 'working')
  try {
    await database.transaction(async (tx) => {
      await pencilSession(tx, sessionId)
      await settlePencilling(tx, sessionId)
    })
  }
  catch (error) {
    const failure = giveUp(error, run)
    const [standing] = await database.select({ id: pencillings.sessionId }).from(pencillings).where(eq(pencillings.sessionId, sessionId))
    if (!standing) return
    const words = (message: string) => message.replaceAll('The clip is kept as uploaded', 'What is inked stays as it is').replaceAll('The clip is kept', 'What is inked stays as it is')
    await setPencilling(database, sessionId, failure ? 'failed' : 'waiting', words(failure?.message ?? whyAgain(error, run)))
    if (!failure) throw error
  }
}
