import { and, eq, inArray, sql } from 'drizzle-orm'
import type { FrameRate } from '#shared/types/media'
import type { MomentGroup, MomentHit } from '#shared/types/search'
import { formatSeconds } from '#shared/utils/timecode'
import { markWords } from '../../indexing/search/mark'
import type { Ranked } from '../../indexing/search/rank'
import type { Understanding } from '../../indexing/search/types'
import type { Executor } from '../../database/client'
import { builds, clips, memberships, parts, sessions, steps } from '../../database/schema'
import { isPlayable } from '../clipView'
import type { FoundPassage } from './finding'
import { pictureAt, pictureColumns } from './picture'

/** A page of ranked passages as people read them: by build and step, each with picture, words and link. */
export async function groupsOf(executor: Executor, userId: string | null, question: Understanding, page: Ranked<FoundPassage>[]): Promise<MomentGroup[]> {
  if (!page.length) return []
  const clipRows = await readClips(executor, userId, distinct(page.map(moment => moment.candidate.clipId)))
  const stepRows = await readSteps(executor, distinct(page.flatMap(moment => moment.candidate.chapter?.stepId ?? [])))
  const partNames = await readPartNames(executor, distinct(page.flatMap(moment => moment.candidate.chapter?.partIds ?? [])))
  const groups = new Map<string, MomentGroup>()
  for (const moment of page) {
    const { candidate } = moment
    const clip = clipRows.get(candidate.clipId)
    if (!clip) continue
    const step = candidate.chapter?.stepId ? stepRows.get(candidate.chapter.stepId) ?? null : null
    const key = `${candidate.buildId} ${step?.id}`
    const group = groups.get(key) ?? { build: clip.build, step, moments: [] }
    groups.set(key, group)
    group.moments.push(toHit(question, moment, clip, partNames))
  }
  return [...groups.values()]
}

function toHit(question: Understanding, { candidate, score, atMs, line }: Ranked<FoundPassage>, clip: ClipRow, partNames: Map<string, string>): MomentHit {
  const { chapter } = candidate
  const works = clip.role === 'builder' || clip.role === 'crew'
  const at = formatSeconds(atMs)
  return {
    id: candidate.id,
    clip: { id: clip.id, name: clip.name, durationMs: clip.durationMs, src: isPlayable(clip) ? `/media/clips/${clip.id}/video` : null, width: clip.video?.width ?? null, height: clip.video?.height ?? null, frameRate: clip.video?.frameRate ?? null },
    session: works ? { id: clip.sessionId, title: clip.title } : null,
    date: clip.date,
    chapter: chapter && { id: chapter.id, startMs: chapter.startMs, endMs: chapter.endMs, operation: chapter.operation, inking: chapter.inking, parts: chapter.partIds.flatMap(id => partNames.get(id) ?? []) },
    atMs,
    endMs: candidate.endMs,
    picture: pictureAt(clip.id, clip, atMs),
    words: markWords(candidate.lines, Math.max(0, line), question.concepts),
    score,
    link: works ? `/builds/${clip.build.id}/sessions/${clip.sessionId}?clip=${clip.id}&at=${at}` : `/watch/${clip.build.address}/moments/${clip.id}?at=${at}`,
  }
}

async function readClips(executor: Executor, userId: string | null, ids: string[]) {
  const rows = await executor.select({
    id: clips.id, name: clips.name, durationMs: clips.durationMs, proxyKey: clips.proxyKey, sessionId: clips.sessionId,
    probe: sql<ClipProbe>`jsonb_build_object('proxyReasons', coalesce(${clips.probe}->'proxyReasons', '["container"]'))`,
    video: sql<{ width: number, height: number, frameRate?: FrameRate } | null>`${clips.probe}->'video'`,
    ...pictureColumns,
    title: sessions.title, date: sessions.date, role: memberships.role,
    build: { id: builds.id, name: builds.name, address: builds.address },
  }).from(clips)
    .innerJoin(sessions, eq(sessions.id, clips.sessionId))
    .innerJoin(builds, eq(builds.id, clips.buildId))
    .leftJoin(memberships, and(eq(memberships.buildId, builds.id), userId ? eq(memberships.userId, userId) : sql`false`))
    .where(inArray(clips.id, ids))
  return new Map(rows.map(row => [row.id, row]))
}
type ClipProbe = NonNullable<Parameters<typeof isPlayable>[0]['probe']>
type ClipRow = Awaited<ReturnType<typeof readClips>> extends Map<string, infer Row> ? Row : never

async function readSteps(executor: Executor, ids: string[]) {
  if (!ids.length) return new Map<string, { id: string, number: number, title: string, stage: string }>()
  const rows = await executor.select({ id: steps.id, number: steps.number, title: steps.title, stage: steps.stage }).from(steps).where(inArray(steps.id, ids))
  return new Map(rows.map(row => [row.id, row]))
}

async function readPartNames(executor: Executor, ids: string[]) {
  if (!ids.length) return new Map<string, string>()
  const rows = await executor.select({ id: parts.id, name: parts.name }).from(parts).where(inArray(parts.id, ids))
  return new Map(rows.map(row => [row.id, row.name]))
}

const distinct = (ids: string[]) => [...new Set(ids)]
