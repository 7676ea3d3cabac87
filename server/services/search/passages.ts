import { eq, inArray, sql } from 'drizzle-orm'
import { type CutPassage, cutPassages, type PassageChapter } from '../../indexing/search/cutPassages'
import { isStopWord, tokenise } from '../../indexing/words/tokenise'
import type { Executor } from '../../database/client'
import { captionTracks, chapterParts, chapters, clips, cues, parts, passages, steps } from '../../database/schema'

/** Rows written in one statement. */
const BATCH = 500

/**
 * Brings what search knows of a clip up to date. Call it in the transaction that changed the clip's cues or
 * chapters (written, corrected, moved, inked, deleted, paired with another clip). Only passages that changed
 * are written. A clip that is gone needs no call: its passages go with it.
 */
export async function refreshPassages(executor: Executor, clipId: string): Promise<void> {
  const [clip] = await executor.select({ buildId: clips.buildId, sessionId: clips.sessionId }).from(clips).where(eq(clips.id, clipId))
  if (!clip) return
  // Two refreshes of a build follow one another: the second reads what the first has written.
  await executor.execute(sql`select pg_advisory_xact_lock(72426, hashtext(${clip.buildId}::text))`)
  const wanted = cutPassages(clip.buildId, await cuesOf(executor, clipId), await chaptersOf(executor, clipId))
  const kept = await executor.select({
    id: passages.id, trackId: passages.trackId, chapterId: passages.chapterId, startMs: passages.startMs, endMs: passages.endMs,
    starts: passages.starts, lines: passages.lines, lexemes: sql<string[]>`tsvector_to_array(${passages.lexemes})`,
  }).from(passages).where(eq(passages.clipId, clipId))

  const standing = new Map(kept.map(({ id, ...passage }) => [keyOf(passage), id]))
  const missing = wanted.filter(passage => !standing.delete(keyOf(passage)))
  if (standing.size) await executor.delete(passages).where(inArray(passages.id, [...standing.values()]))
  if (!missing.length) return
  await nameWords(executor, clip.buildId, missing)
  for (let at = 0; at < missing.length; at += BATCH) {
    await executor.insert(passages).values(missing.slice(at, at + BATCH).map(passage => ({
      ...passage, ...clip, clipId, lexemes: sql`array_to_tsvector(${textArray(passage.lexemes)})`,
    })))
  }
}

/**
 * The same for every clip that shows a step or part, after its title, name or aliases changed. Searches of one
 * build need no call (they read the plan as it is); searches over all builds go by the words kept here.
 */
export async function refreshPassagesNaming(executor: Executor, named: { stepId: string } | { partId: string }): Promise<void> {
  const rows = 'stepId' in named
    ? await executor.selectDistinct({ clipId: chapters.clipId }).from(chapters).where(eq(chapters.stepId, named.stepId))
    : await executor.selectDistinct({ clipId: chapters.clipId }).from(chapterParts).innerJoin(chapters, eq(chapters.id, chapterParts.chapterId)).where(eq(chapterParts.partId, named.partId))
  for (const { clipId } of rows) await refreshPassages(executor, clipId)
}

function cuesOf(executor: Executor, clipId: string) {
  return executor.select({ trackId: cues.trackId, startMs: cues.startMs, endMs: cues.endMs, text: cues.text })
    .from(cues).innerJoin(captionTracks, eq(captionTracks.id, cues.trackId))
    .where(eq(cues.clipId, clipId)).orderBy(cues.trackId, cues.startMs, cues.endMs, cues.id)
}

async function chaptersOf(executor: Executor, clipId: string): Promise<PassageChapter[]> {
  const rows = await executor.select({
    id: chapters.id, startMs: chapters.startMs, endMs: chapters.endMs, stepId: chapters.stepId, operation: chapters.operation, inking: chapters.inking,
    note: chapters.note, title: steps.title,
    parts: sql<{ id: string, words: string }[]>`coalesce((select json_agg(json_build_object('id', ${parts.id}, 'words', ${parts.name} || ' ' || array_to_string(${parts.aliases}, ' ')) order by ${parts.id})
      from ${chapterParts} join ${parts} on ${parts.id} = ${chapterParts.partId} where ${chapterParts.chapterId} = ${chapters.id}), '[]')`,
  }).from(chapters).leftJoin(steps, eq(steps.id, chapters.stepId)).where(eq(chapters.clipId, clipId)).orderBy(chapters.startMs)
  return rows.map(({ note, title, parts, ...chapter }) => ({ ...chapter, partIds: parts.map(part => part.id), words: [title ?? '', note, ...parts.map(part => part.words)] }))
}

/** Remembers how new stems are said, before the triggers count them; in order, so that two writers never cross. */
async function nameWords(executor: Executor, buildId: string, added: CutPassage[]): Promise<void> {
  const words = new Map<string, string>()
  for (const token of added.flatMap(passage => passage.lines).flatMap(line => tokenise(line))) {
    if (isStopWord(token.word)) continue
    const said = words.get(token.stem)
    // The shortest form reads best in a suggestion: "clamp" rather than "clamping".
    if (said === undefined || token.word.length < said.length) words.set(token.stem, token.word)
  }
  if (!words.size) return
  const stems = [...words.keys()].sort()
  await executor.execute(sql`
    insert into search_words (build_id, stem, word)
    select ${buildId}::uuid, stem, word from unnest(${textArray(stems)}, ${textArray(stems.map(stem => words.get(stem)!))}) as said (stem, word)
    on conflict do nothing`)
}

/** One parameter for a whole array: a list of thousands of parameters is slow to plan. */
export function textArray(values: string[]) {
  return sql`${sql.param(values)}::text[]`
}

function keyOf(passage: CutPassage): string {
  return JSON.stringify([passage.trackId, passage.chapterId, passage.startMs, passage.endMs, passage.starts, passage.lines, [...passage.lexemes].sort()])
}
