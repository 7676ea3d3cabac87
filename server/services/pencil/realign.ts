import { and, eq, isNull, sql } from 'drizzle-orm'
import type { Database } from '../../database/client'
import { clips, cues, sessions, steps } from '../../database/schema'
import { pencilSession, type Repencilled } from './pencilSession'
import { enqueuePencilling } from './queue'

/** Captions times steps up to which a request waits for it: some 600 captions and 30 steps, well under a second. */
const AT_ONCE = 20_000

/**
 * Aligns the program's own chapters around what a person has just changed: at once where that takes no time worth
 * speaking of, else by the worker. A fault in it never takes the person's edit back, which stands already.
 */
export async function realign(database: Database, sessionId: string): Promise<Repencilled['chapters']> {
  const nothing = { changed: [], removed: [] }
  const size = await sizeOf(database, sessionId)
  if (!size) return nothing
  try {
    if (size <= AT_ONCE) return (await database.transaction(tx => pencilSession(tx, sessionId))).chapters
  }
  catch (error) {
    console.error(`Session ${sessionId} could not be aligned anew at once, so the worker tries: ${(error as Error).message}`)
  }
  await database.transaction(tx => enqueuePencilling(tx, sessionId))
  return nothing
}

async function sizeOf(database: Database, sessionId: string): Promise<number> {
  const [said] = await database.select({ count: sql<number>`count(*)::int` }).from(cues).innerJoin(clips, eq(clips.id, cues.clipId)).where(eq(clips.sessionId, sessionId))
  if (!said?.count) return 0
  const [plan] = await database.select({ count: sql<number>`count(*)::int` }).from(steps).innerJoin(sessions, eq(sessions.buildId, steps.buildId)).where(and(eq(sessions.id, sessionId), isNull(steps.archivedAt)))
  return said.count * Math.max(1, plan?.count ?? 0)
}
