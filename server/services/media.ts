import { and, eq, sql } from 'drizzle-orm'
import { notFound } from '#shared/utils/errors'
import { writeVtt } from '#server/indexing/captions/writeCaptions'
import { cuesForStorage } from '#server/indexing/captions/order'
import type { Storage } from '../adapters/storage'
import type { Executor } from '../database/client'
import { captionTracks, chapters, type Clip, clips } from '../database/schema'
import { requireBuild } from './access'
import { isPlayable } from './clipView'
import { trackCues } from './cues'

/**
 * The clip, if its pictures and sound may be seen: by crew and builder always, by anyone else only where
 * something of it is published, that is, an inked chapter in a build they may watch.
 */
export async function requireMedia(executor: Executor, userId: string | null, clipId: string): Promise<Clip> {
  return (await requireMediaOf(executor, userId, clipId)).clip
}

/** The same, and whether the asker works on the build or sees only what is published. */
export async function requireMediaOf(executor: Executor, userId: string | null, clipId: string): Promise<{ clip: Clip, works: boolean }> {
  const { role } = await requireBuild(executor, userId, 'clip', clipId, 'watch')
  const works = role === 'builder' || role === 'crew'
  const published = sql`exists (select 1 from ${chapters} where ${chapters.clipId} = ${clips.id} and ${chapters.inking} = 'inked')`
  const [clip] = await executor.select().from(clips).where(and(eq(clips.id, clipId), works ? undefined : published))
  if (!clip) throw notFound('That clip')
  return { clip, works }
}

/** Type by container: what the phone called it is not to be trusted with a browser. */
function videoType(clip: Clip): string {
  if (clip.proxyKey) return 'video/mp4'
  const container = clip.probe?.container ?? ''
  const kind = clip.probe?.video ? 'video' : 'audio'
  if (container.startsWith('matroska')) return `${kind}/webm`
  if (container.startsWith('mov')) return `${kind}/mp4`
  return { mp3: 'audio/mpeg', wav: 'audio/wav', ogg: 'audio/ogg', flac: 'audio/flac' }[container] ?? 'application/octet-stream'
}

export async function videoAddress(storage: Storage, clip: Clip): Promise<string> {
  if (!isPlayable(clip)) throw notFound('A playable copy of that clip')
  return storage.presignGet(clip.proxyKey ?? clip.objectKey, { contentType: videoType(clip) })
}

export async function posterAddress(storage: Storage, clip: Clip): Promise<string> {
  if (!clip.footage?.poster) throw notFound('A picture of that clip')
  return storage.presignGet(clip.footage.poster.key, { contentType: 'image/jpeg' })
}

export async function sheetAddress(storage: Storage, clip: Clip, n: number): Promise<string> {
  const key = clip.footage?.sheets?.images[n]
  if (!key) throw notFound('That picture sheet')
  return storage.presignGet(key, { contentType: 'image/jpeg' })
}

export async function peaksAddress(storage: Storage, clip: Clip): Promise<string> {
  if (!clip.footage?.peaks) throw notFound('The sound of that clip')
  return storage.presignGet(clip.footage.peaks.key, { contentType: 'application/octet-stream' })
}

/** A clip's captions as they stand now, for the player: all of them, or those that start within inked chapters. */
export async function clipCaptions(executor: Executor, clip: Clip, trackId: string, options: { publishedOnly?: boolean } = {}): Promise<string> {
  const [track] = await executor.select({ id: captionTracks.id }).from(captionTracks).where(and(eq(captionTracks.id, trackId), eq(captionTracks.clipId, clip.id)))
  if (!track) throw notFound('Those captions')
  const { cues } = await trackCues(executor, trackId)
  if (!options.publishedOnly) return writeVtt(cuesForStorage(cues))
  const inked = await executor.select({ startMs: chapters.startMs, endMs: chapters.endMs }).from(chapters).where(and(eq(chapters.clipId, clip.id), eq(chapters.inking, 'inked')))
  return writeVtt(cuesForStorage(cues.filter(cue => inked.some(chapter => cue.startMs >= chapter.startMs && cue.startMs < chapter.endMs))))
}
