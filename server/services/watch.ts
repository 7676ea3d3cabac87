import { and, asc, eq, isNull, sql } from 'drizzle-orm'
import type { WatchBuild, WatchHead, WatchList, WatchListed, WatchMoment, WatchStep } from '#shared/types/watch'
import type { Units } from '#shared/types/trade'
import { notFound } from '#shared/utils/errors'
import type { Executor } from '../database/client'
import { type Build, builds, memberships, parts, stepParts, steps, users } from '../database/schema'
import { publishedFacts } from './facts'
import { examplesFor } from './search/instead'
import { maySeeBuild } from './access'
import { pictureColumns, type PictureSource } from './search/picture'
import { pictureOf, publishedChapters, type PublishedChapter, publishedClips, publishedLines, publishedSql } from './watchFootage'

/**
 * The public face of builds. Everything here shows inked chapters only, the clips under them and the captions
 * within them, whoever asks: a builder sees what the world would see.
 */

/** Builds on one page of the list. */
const MOST_LISTED = 200

/**
 * Public builds that show something, the fullest first, in one query. Unlisted ones are reached by their link alone.
 * The picture is that of the longest stretch of work that has one.
 */
export async function watchList(executor: Executor, siteUrl: string): Promise<WatchList> {
  const work = sql`${publishedSql} and c.operation <> 'none'`
  const { rows } = await executor.execute<ListedRow>(sql`
    select b.address, b.name, b.boat, b.about, shown.ms as "shownMs", shown.steps as "stepsShown",
      (select count(*)::int from steps s where s.build_id = b.id and s.archived_at is null) as steps,
      best.clip_id as "clipId", best.start_ms as "startMs", best.end_ms as "endMs", best.poster, best.sheets
    from builds b
    join lateral (
      select sum(c.end_ms - c.start_ms)::float8 as ms, count(distinct s.id)::int as steps
      from chapters c join clips on clips.id = c.clip_id left join steps s on s.id = c.step_id and s.archived_at is null
      where c.build_id = b.id and ${work}
    ) shown on shown.ms > 0
    join lateral (
      select c.clip_id, c.start_ms, c.end_ms, ${pictureColumns.poster} as poster, ${pictureColumns.sheets} as sheets
      from chapters c join clips on clips.id = c.clip_id where c.build_id = b.id and ${work}
      order by (clips.footage is null), c.end_ms - c.start_ms desc, c.id limit 1
    ) best on true
    where b.visibility = 'public'
    order by shown.ms desc, b.name limit ${MOST_LISTED}`)
  return {
    builds: rows.map(({ clipId, startMs, endMs, poster, sheets, ...build }) => ({ ...build, picture: pictureOf(clipId, { startMs, endMs }, { poster, sheets }) })),
    canonical: `${siteUrl}/watch`,
  }
}
interface ListedRow extends Omit<WatchListed, 'picture'>, PictureSource, Record<string, unknown> { clipId: string, startMs: number, endMs: number }

export async function watchBuild(executor: Executor, userId: string | null, address: string, siteUrl: string): Promise<WatchBuild> {
  const { build, head } = await requireWatched(executor, userId, address, siteUrl, '')
  const chapters = await publishedChapters(executor, build.id)
  const rows = await executor.select({ number: steps.number, title: steps.title, stage: steps.stage }).from(steps).where(and(eq(steps.buildId, build.id), isNull(steps.archivedAt))).orderBy(asc(steps.position))
  const stages: WatchBuild['stages'] = []
  for (const step of rows) {
    if (stages.at(-1)?.name !== step.stage) stages.push({ name: step.stage, steps: [] })
    const own = chapters.filter(chapter => chapter.step?.number === step.number)
    stages.at(-1)!.steps.push({ number: step.number, title: step.title, chapters: own.length, shownMs: shownMs(own), picture: longest(own)?.picture ?? null })
  }
  const [owner] = await executor.select({ name: users.name }).from(memberships).innerJoin(users, eq(users.id, memberships.userId)).where(and(eq(memberships.buildId, build.id), eq(memberships.role, 'builder'))).orderBy(asc(memberships.createdAt)).limit(1)
  const cover = longest(chapters)
  return { ...head, builder: owner?.name ?? '', stages, shownMs: shownMs(chapters), picture: cover?.picture ?? null, cover: coverOf(cover, siteUrl), examples: await examplesFor(executor, build.id) }
}

export async function watchStep(executor: Executor, userId: string | null, address: string, number: number, siteUrl: string): Promise<WatchStep> {
  const { build, head } = await requireWatched(executor, userId, address, siteUrl, `/steps/${number}`)
  const all = await executor.select().from(steps).where(and(eq(steps.buildId, build.id), isNull(steps.archivedAt))).orderBy(asc(steps.position))
  const at = all.findIndex(step => step.number === number)
  const step = all[at]
  if (!step) throw notFound('That step')
  const chapters = (await publishedChapters(executor, build.id)).filter(chapter => chapter.step?.number === number)
  const named = await executor.select({ name: parts.name, material: parts.material, thicknessMm: parts.thicknessMm, quantity: parts.quantity })
    .from(stepParts).innerJoin(parts, eq(parts.id, stepParts.partId)).where(and(eq(stepParts.stepId, step.id), isNull(parts.archivedAt))).orderBy(asc(parts.position))
  const beside = (index: number) => all[index] ? { number: all[index].number, title: all[index].title } : null
  return {
    ...head,
    step: { number, title: step.title, stage: step.stage, description: step.description, materials: step.materials, parts: named },
    chapters: chapters.map(toPublic),
    facts: await publishedFacts(executor, step.id),
    units: build.units,
    clips: await publishedClips(executor, [...new Set(chapters.map(chapter => chapter.clipId))]),
    previous: beside(at - 1), next: beside(at + 1), cover: coverOf(longest(chapters), siteUrl),
  }
}

export async function watchMoment(executor: Executor, userId: string | null, address: string, clipId: string, siteUrl: string): Promise<WatchMoment> {
  const { build, head } = await requireWatched(executor, userId, address, siteUrl, `/moments/${clipId}`)
  const chapters = await publishedChapters(executor, build.id, clipId)
  const [clip] = chapters.length ? await publishedClips(executor, [clipId]) : []
  if (!clip) throw notFound('That moment')
  return { ...head, clip, chapters: chapters.map(toPublic), lines: await publishedLines(executor, clipId), cover: coverOf(longest(chapters), siteUrl) }
}

/** A sitemap holds at most so many addresses (sitemaps.org protocol 0.9). */
const SITEMAP_ADDRESSES = 50_000

/** Pages of public builds for the sitemap, in one query: each build, its steps and clips that are shown. */
export async function listedPages(executor: Executor): Promise<{ path: string, changed: Date }[]> {
  const { rows } = await executor.execute<{ address: string, number: number | null, clipId: string | null, changed: string }>(sql`
    select b.address, s.number, c.clip_id "clipId", greatest(max(b.updated_at), max(c.updated_at)) changed
    from builds b
    left join (chapters c join clips k on k.id = c.clip_id and k.state = 'ready') on c.build_id = b.id and c.inking = 'inked'
    left join steps s on s.id = c.step_id
    where b.visibility = 'public'
    group by grouping sets ((b.id), (b.id, s.number), (b.id, c.clip_id))
    having (grouping(s.number) = 1 and grouping(c.clip_id) = 1) or s.number is not null or c.clip_id is not null
    order by b.created_at, b.id, grouping(s.number) + grouping(c.clip_id) desc, grouping(s.number), s.number, c.clip_id
    limit ${SITEMAP_ADDRESSES}`)
  return rows.map(({ address, number, clipId, changed }) => ({
    path: `/watch/${address}${number !== null ? `/steps/${number}` : clipId ? `/moments/${clipId}` : ''}`, changed: new Date(changed),
  }))
}

async function requireWatched(executor: Executor, userId: string | null, address: string, siteUrl: string, path: string): Promise<{ build: Build & { units: Units }, head: WatchHead }> {
  const [row] = await executor.select({ build: builds }).from(builds)
    .leftJoin(memberships, and(eq(memberships.buildId, builds.id), userId ? eq(memberships.userId, userId) : sql`false`))
    .where(and(eq(builds.address, address), maySeeBuild(userId)))
  if (!row) throw notFound('That build')
  const { build } = row
  return {
    build,
    head: {
      build: { id: build.id, address: build.address, name: build.name, boat: build.boat, about: build.about },
      listed: build.visibility === 'public', canonical: `${siteUrl}/watch/${build.address}${path}`,
    },
  }
}

const shownMs = (chapters: PublishedChapter[]) => chapters.filter(chapter => chapter.operation !== 'none').reduce((sum, chapter) => sum + chapter.endMs - chapter.startMs, 0)

/** The chapter that stands for several: the longest of those that show work. */
function longest(chapters: PublishedChapter[]): PublishedChapter | undefined {
  const worth = (chapter: PublishedChapter) => (chapter.operation === 'none' || !chapter.picture ? 0 : 1) * (chapter.endMs - chapter.startMs)
  return chapters.reduce<PublishedChapter | undefined>((best, chapter) => !best || worth(chapter) > worth(best) ? chapter : best, undefined)
}

function coverOf(chapter: PublishedChapter | undefined, siteUrl: string): string | null {
  return chapter?.hasPoster ? `${siteUrl}/media/clips/${chapter.clipId}/poster` : null
}

function toPublic({ hasPoster: _, ...chapter }: PublishedChapter) {
  return chapter
}
