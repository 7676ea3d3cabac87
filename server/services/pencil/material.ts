import { and, asc, desc, eq, inArray, isNotNull, ne, sql } from 'drizzle-orm'
import type { PencilInput } from '#server/indexing/pencil/pencil'
import type { Learned } from '#server/indexing/pencil/types'
import type { Executor } from '../../database/client'
import { builds, captionTracks, chapters, clips, cues, sessions, sessionSteps } from '../../database/schema'
import { readPlanView } from '../plan'

/** Chapters of other sessions that are listened to for the builder's own words, the newest first. */
const MOST_LEARNED = 300

export interface PencilMaterial {
  buildId: string
  input: PencilInput
  /** Clips of `input.clips`, in the same order. */
  clips: { id: string, durationMs: number }[]
  stepOf: (number: number | null) => string | null
  partOf: (name: string) => string | null
}

/**
 * All that the program listens to for one session: what is said over its clips in the order of its clock, the plan,
 * the steps that are ticked, what people have made or touched (it stays where it is), and speech that people have
 * tied to steps in other sessions. Null when the session is gone.
 */
export async function readPencilMaterial(executor: Executor, sessionId: string): Promise<PencilMaterial | null> {
  const [session] = await executor.select({ buildId: sessions.buildId, units: builds.units }).from(sessions).innerJoin(builds, eq(builds.id, sessions.buildId)).where(eq(sessions.id, sessionId))
  if (!session) return null
  const plan = await readPlanView(executor, session.buildId, { archived: true })
  const steps = plan.steps.filter(step => !step.archived)
  const partName = new Map(plan.parts.map(part => [part.id, part.name]))
  const numberOf = new Map(plan.steps.map(step => [step.id, step.number]))
  const ticked = await executor.select({ stepId: sessionSteps.stepId }).from(sessionSteps).where(eq(sessionSteps.sessionId, sessionId))
  const spoken = await readSpokenClips(executor, sessionId)
  const at = new Map(spoken.map((clip, index) => [clip.id, index]))
  const touched = await executor.select({ clipId: chapters.clipId, startMs: chapters.startMs, endMs: chapters.endMs, stepId: chapters.stepId, operation: chapters.operation })
    .from(chapters).where(and(eq(chapters.sessionId, sessionId), eq(chapters.proposed, false))).orderBy(chapters.clipId, chapters.startMs)
  const number = (stepId: string | null) => stepId === null ? null : numberOf.get(stepId) ?? null
  const partIds = new Map(plan.parts.filter(part => !part.archived).map(part => [part.name.toLowerCase(), part.id]))
  const stepIds = new Map(steps.map(step => [step.number, step.id]))
  return {
    buildId: session.buildId,
    clips: spoken.map(({ id, durationMs }) => ({ id, durationMs })),
    stepOf: wanted => wanted === null ? null : stepIds.get(wanted) ?? null,
    partOf: name => partIds.get(name.toLowerCase()) ?? null,
    input: {
      steps: steps.map(step => ({ number: step.number, stage: step.stage, title: step.title, description: step.description, materials: step.materials, parts: step.partIds.flatMap(id => partName.get(id) ?? []) })),
      parts: plan.parts.filter(part => !part.archived).map(({ name, aliases, material, thicknessMm }) => ({ name, aliases, material, thicknessMm })),
      clips: spoken.map(({ cues, durationMs, sceneChangesMs }) => ({ cues, durationMs, sceneChangesMs })),
      ticked: ticked.flatMap(({ stepId }) => numberOf.get(stepId) ?? []),
      fixed: touched.flatMap(({ clipId, stepId, ...chapter }) => at.has(clipId) ? [{ ...chapter, clip: at.get(clipId)!, step: number(stepId) }] : []),
      learned: await readLearned(executor, session.buildId, sessionId, numberOf),
      units: session.units,
    },
  }
}

interface SpokenRow { id: string, durationMs: number, sceneChangesMs: number[], cues: { startMs: number, endMs: number, text: string }[] }

/** Clips with captions in the order of the session's clock. Of several languages the English one counts, else the longest. */
async function readSpokenClips(executor: Executor, sessionId: string): Promise<SpokenRow[]> {
  const rows = await executor.select({ id: clips.id, durationMs: clips.durationMs, footage: clips.footage }).from(clips)
    .where(eq(clips.sessionId, sessionId)).orderBy(asc(clips.offsetMs), asc(clips.name), asc(clips.id))
  const tracks = await executor.select({ id: captionTracks.id, clipId: captionTracks.clipId, language: captionTracks.language, count: sql<number>`(select count(*)::int from cues where cues.track_id = caption_tracks.id)` })
    .from(captionTracks).where(and(eq(captionTracks.sessionId, sessionId), isNotNull(captionTracks.clipId))).orderBy(captionTracks.createdAt, captionTracks.id)
  const english = (language: string) => Number(/^(?:en|und)\b/i.test(language))
  const chosen = rows.flatMap((clip) => {
    const [track] = tracks.filter(one => one.clipId === clip.id && one.count > 0).sort((a, b) => english(b.language) - english(a.language) || b.count - a.count)
    return track ? [{ clip, trackId: track.id }] : []
  })
  if (!chosen.length) return []
  const lines = await executor.select({ trackId: cues.trackId, startMs: cues.startMs, endMs: cues.endMs, text: cues.text }).from(cues)
    .where(inArray(cues.trackId, chosen.map(one => one.trackId))).orderBy(cues.startMs, cues.endMs, cues.id)
  return chosen.flatMap(({ clip, trackId }) => {
    const own = lines.filter(line => line.trackId === trackId)
    const durationMs = clip.durationMs ?? Math.max(...own.map(line => line.endMs))
    // What stands behind the end of the footage is said over nothing.
    const within = own.filter(line => line.startMs < durationMs).map(({ startMs, endMs, text }) => ({ startMs, endMs: Math.min(endMs, durationMs), text }))
    return within.length ? [{ id: clip.id, durationMs, sceneChangesMs: clip.footage?.sceneChangesMs ?? [], cues: within }] : []
  })
}

/** What is said under inked chapters of the build's other sessions. */
async function readLearned(executor: Executor, buildId: string, sessionId: string, numberOf: ReadonlyMap<string, number>): Promise<Learned[]> {
  const inked = await executor.select({ id: chapters.id, stepId: chapters.stepId, operation: chapters.operation }).from(chapters)
    .where(and(eq(chapters.buildId, buildId), ne(chapters.sessionId, sessionId), eq(chapters.inking, 'inked'), isNotNull(chapters.stepId)))
    .orderBy(desc(chapters.updatedAt), chapters.id).limit(MOST_LEARNED)
  if (!inked.length) return []
  const said = await executor.select({ id: chapters.id, text: sql<string>`string_agg(${cues.text}, ' ' order by ${cues.startMs})` }).from(chapters)
    .innerJoin(cues, and(eq(cues.clipId, chapters.clipId), sql`${cues.startMs} >= ${chapters.startMs} and ${cues.startMs} < ${chapters.endMs}`))
    .where(inArray(chapters.id, inked.map(chapter => chapter.id))).groupBy(chapters.id)
  const text = new Map(said.map(row => [row.id, row.text]))
  return inked.flatMap(({ id, stepId, operation }) => text.has(id) && numberOf.has(stepId!) ? [{ step: numberOf.get(stepId!)!, operation, text: text.get(id)! }] : [])
}
