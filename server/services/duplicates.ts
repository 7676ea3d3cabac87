import { and, eq } from 'drizzle-orm'
import { DomainError } from '#shared/utils/errors'
import type { Database, Executor } from '../database/client'
import { captionTracks, type Clip, clips } from '../database/schema'
import { readTracksAgain } from './clipTasks'
import { dropClip } from './clips'
import { announce } from './live'

/** The clip of a build that has this content, if any. */
export async function duplicateOf(executor: Executor, buildId: string, contentHash: string): Promise<Clip | null> {
  const [found] = await executor.select().from(clips).where(and(eq(clips.buildId, buildId), eq(clips.contentHash, contentHash)))
  return found ?? null
}

/** The refusal of a double, with where the clip that has the content can be found. */
export function conflictWith(clip: Clip, name: string): DomainError {
  const also = clip.name === name ? '' : ` as ${clip.name}`
  return new DomainError('conflict', `${name} is in this build already${also}, with the same content to the last byte. It was not added again; the clip that has it is kept as it is.`, { clipId: clip.id, sessionId: clip.sessionId, name: clip.name })
}

/** Takes back an upload that turned out to be a double; captions meant for it go to the clip that stays. */
export async function removeDouble(database: Database, clip: Clip, stays: Clip, userId: string): Promise<void> {
  await database.transaction(async (tx) => {
    const heir = stays.sessionId === clip.sessionId ? stays.id : null
    await tx.update(captionTracks).set({ clipId: heir, read: false }).where(eq(captionTracks.clipId, clip.id))
    await dropClip(tx, clip)
    if (heir) await readTracksAgain(tx, stays)
    await announce(tx, { sessionId: clip.sessionId, kind: 'clip', id: clip.id, by: userId })
  })
}
