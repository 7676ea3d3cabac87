import { and, asc, eq, inArray, sql } from 'drizzle-orm'
import type { WatchChapter, WatchClip, WatchMoment } from '#shared/types/watch'
import type { Executor } from '../database/client'
import { captionTracks, chapterParts, chapters, clips, cues, parts, sessions, steps } from '../database/schema'
import { isPlayable } from './clipView'
import { pictureAt, pictureColumns, type PictureSource } from './search/picture'

export interface PublishedChapter extends WatchChapter { hasPoster: boolean }

/** Into a chapter, where its picture is taken: past the hand that starts the camera, ms. */
const SETTLED_MS = 4_000

/** The one place that says what is published: inked chapters of clips that are whole. */
const published = and(eq(chapters.inking, 'inked'), eq(clips.state, 'ready'))

/** The same of tables `chapters c` and `clips`. */
export const publishedSql = sql`c.inking = 'inked' and clips.state = 'ready'`

/** The picture of a chapter. */
export function pictureOf(clipId: string, { startMs, endMs }: { startMs: number, endMs: number }, source: PictureSource) {
  return pictureAt(clipId, source, Math.min(startMs + SETTLED_MS, (startMs + endMs) / 2))
}

/** A build's published chapters by plan order, then as they were filmed; of one clip, by time. */
export async function publishedChapters(executor: Executor, buildId: string, clipId?: string): Promise<PublishedChapter[]> {
  const rows = await executor.select({
    id: chapters.id, clipId: chapters.clipId, startMs: chapters.startMs, endMs: chapters.endMs, operation: chapters.operation, note: chapters.note,
    number: steps.number, title: steps.title, ...pictureColumns,
    parts: sql<string[]>`array(select ${parts.name} from ${chapterParts} join ${parts} on ${parts.id} = ${chapterParts.partId} where ${chapterParts.chapterId} = ${chapters.id} order by ${parts.position})`,
  }).from(chapters)
    .innerJoin(clips, eq(clips.id, chapters.clipId))
    .innerJoin(sessions, eq(sessions.id, chapters.sessionId))
    .leftJoin(steps, eq(steps.id, chapters.stepId))
    .where(and(eq(chapters.buildId, buildId), published, clipId ? eq(chapters.clipId, clipId) : undefined))
    .orderBy(...clipId ? [asc(chapters.startMs)] : [sql`${steps.position} nulls last`, asc(sessions.date), asc(clips.offsetMs), asc(clips.id), asc(chapters.startMs)])
  return rows.map(({ number, title, poster, sheets, ...row }) => ({
    ...row,
    step: number !== null && title !== null ? { number, title } : null,
    picture: pictureOf(row.clipId, row, { poster, sheets }),
    hasPoster: poster !== null,
  }))
}

/** Clips under published chapters, as a player needs them. */
export async function publishedClips(executor: Executor, ids: string[]): Promise<WatchClip[]> {
  if (!ids.length) return []
  const rows = await executor.select({ clip: clips, date: sessions.date }).from(clips).innerJoin(sessions, eq(sessions.id, clips.sessionId))
    .where(and(inArray(clips.id, ids), eq(clips.state, 'ready'), sql`exists (select 1 from ${chapters} where ${chapters.clipId} = ${clips.id} and ${chapters.inking} = 'inked')`))
  const tracks = await executor.select({ id: captionTracks.id, clipId: captionTracks.clipId, language: captionTracks.language }).from(captionTracks)
    .where(and(inArray(captionTracks.clipId, ids), eq(captionTracks.read, true))).orderBy(asc(captionTracks.createdAt), asc(captionTracks.id))
  return rows.map(({ clip, date }) => ({
    id: clip.id, date, durationMs: clip.durationMs ?? 0,
    src: isPlayable(clip) ? `/media/clips/${clip.id}/video` : null,
    width: clip.probe?.video?.width ?? 16, height: clip.probe?.video?.height ?? 9, frameRate: clip.probe?.video?.frameRate ?? null,
    poster: clip.footage?.poster ? `/media/clips/${clip.id}/poster` : null,
    tracks: tracks.filter(track => track.clipId === clip.id).map(track => ({
      language: track.language, label: languageName(track.language), src: `/media/clips/${clip.id}/captions/${track.id}.vtt`,
    })),
  }))
}

/** What is said within published chapters of a clip, by its first caption file. */
export async function publishedLines(executor: Executor, clipId: string): Promise<WatchMoment['lines']> {
  return executor.select({ startMs: cues.startMs, endMs: cues.endMs, text: cues.text }).from(cues)
    .where(and(
      eq(cues.clipId, clipId),
      sql`${cues.trackId} = (select ${captionTracks.id} from ${captionTracks} where ${captionTracks.clipId} = ${clipId} and ${captionTracks.read} order by ${captionTracks.createdAt}, ${captionTracks.id} limit 1)`,
      sql`exists (select 1 from ${chapters} where ${chapters.clipId} = ${cues.clipId} and ${chapters.inking} = 'inked' and ${cues.startMs} >= ${chapters.startMs} and ${cues.startMs} < ${chapters.endMs})`,
    ))
    .orderBy(asc(cues.startMs), asc(cues.endMs))
}

function languageName(tag: string): string {
  if (tag === 'und') return 'Captions'
  try {
    return new Intl.DisplayNames(['en'], { type: 'language' }).of(tag) ?? tag
  }
  catch {
    return tag
  }
}
