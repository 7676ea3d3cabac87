import { and, eq, isNotNull, isNull } from 'drizzle-orm'
import type { Transaction } from '../database/client'
import { captionTracks, type Clip, cues } from '../database/schema'
import { announce } from './live'
import { enqueuePencilling } from './pencil/queue'
import { refreshPassages } from './search/passages'

/**
 * Lets a clip's caption files go back to waiting, because the clip will never be shown. Text tracks from inside the
 * clip stay with it, and so does a file that somebody has corrected: only a person may move that work.
 */
export async function releaseTracks(tx: Transaction, clip: Pick<Clip, 'id' | 'sessionId'>): Promise<void> {
  const tracks = await tx.select({ id: captionTracks.id }).from(captionTracks).where(and(eq(captionTracks.clipId, clip.id), isNull(captionTracks.embeddedStream))).for('update')
  for (const { id } of tracks) {
    const [corrected] = await tx.select({ id: cues.id }).from(cues).where(and(eq(cues.trackId, id), isNotNull(cues.originalText))).limit(1)
    if (corrected) continue
    await tx.delete(cues).where(eq(cues.trackId, id))
    await tx.update(captionTracks).set({ clipId: null, read: false, doubt: null, kept: false }).where(eq(captionTracks.id, id))
    await announce(tx, { sessionId: clip.sessionId, kind: 'captions', id })
  }
  if (!tracks.length) return
  await refreshPassages(tx, clip.id)
  await enqueuePencilling(tx, clip.sessionId)
}
