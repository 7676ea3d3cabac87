import { eq, inArray, sql } from 'drizzle-orm'
import { besideWalls, matchMoments, matchStretches, type Stretch } from '#server/indexing/proposals/match'
import { pencil, type Pencilled } from '#server/indexing/pencil/pencil'
import type { PencilledChapter } from '#server/indexing/pencil/types'
import { SHORTEST_CHAPTER_MS } from '#shared/utils/chapters/edits'
import { DomainError } from '#shared/utils/errors'
import type { Transaction } from '../../database/client'
import { chapterParts, chapters, dismissals, facts, pickups } from '../../database/schema'
import { lockSession } from '../clips'
import { announce } from '../live'
import { refreshPassages } from '../search/passages'
import { type PencilMaterial, readPencilMaterial } from './material'

/** What the program has come to change of its own. */
export interface Repencilled { chapters: { changed: string[], removed: string[] }, facts: number, pickups: number }

/** Some twenty hours of speech. A file that is no session's captions must not keep the worker for the day. */
const MOST_CUES = 20_000

const NOTHING: Repencilled = { chapters: { changed: [], removed: [] }, facts: 0, pickups: 0 }

/**
 * Pencils a session anew: chapters around what people have made or touched, facts, and what was told but not shown.
 * Replaces only what is the program's own (`proposed`); what nobody would see a difference in is not written, so that
 * a second run changes nothing. Takes the session's lock, as every change of chapters does.
 */
export async function pencilSession(tx: Transaction, sessionId: string): Promise<Repencilled> {
  await lockSession(tx, sessionId)
  const material = await readPencilMaterial(tx, sessionId)
  if (!material) return NOTHING
  const said = material.input.clips.reduce((sum, clip) => sum + clip.cues.length, 0)
  if (said > MOST_CUES) throw new DomainError('bad-input', `${said} captions are more than anybody says in a session`)
  const found: Pencilled = material.clips.length ? pencil(material.input) : { chapters: [], facts: [], toldNotShown: [] }
  const done = {
    chapters: await keepChapters(tx, sessionId, material, found.chapters),
    facts: await keepFacts(tx, sessionId, material, found.facts),
    pickups: await keepPickups(tx, sessionId, material, found.toldNotShown),
  }
  if (done.chapters.changed.length + done.chapters.removed.length + done.facts + done.pickups) await announce(tx, { sessionId, kind: 'pencil', id: sessionId, by: null })
  return done
}

type ChapterFields = Stretch & Pick<typeof chapters.$inferInsert, 'stepId' | 'operation'> & { confidence: number, evidence: { atMs: number, words: string }[], alternatives: NonNullable<typeof chapters.$inferInsert.alternatives>, partIds: string[] }

function toFields(chapter: PencilledChapter, { clips, stepOf, partOf }: PencilMaterial): ChapterFields {
  const clip = clips[chapter.clip]!
  const endMs = Math.min(Math.round(chapter.endMs), clip.durationMs)
  return {
    clipId: clip.id, startMs: Math.round(chapter.startMs), endMs,
    stepId: chapter.operation === 'none' ? null : stepOf(chapter.step), operation: chapter.operation,
    confidence: share(chapter.confidence),
    evidence: chapter.evidence.map(({ atMs, words }) => ({ atMs: Math.round(atMs), words: words.slice(0, 200) })),
    alternatives: {
      steps: chapter.otherSteps.map(({ step, confidence }) => ({ stepId: stepOf(step), confidence: share(confidence) })),
      operations: chapter.otherOperations.map(({ operation, confidence }) => ({ operation, confidence: share(confidence) })),
    },
    partIds: [...new Set(chapter.parts.flatMap(name => partOf(name) ?? []))].sort(),
  }
}

/** As the database keeps it, so that a second run finds it unchanged. */
const share = (value: number) => Math.round(Math.min(1, Math.max(0, value)) * 1000) / 1000

async function keepChapters(tx: Transaction, sessionId: string, material: PencilMaterial, proposals: PencilledChapter[]): Promise<Repencilled['chapters']> {
  const rows = await tx.select({
    id: chapters.id, clipId: chapters.clipId, startMs: chapters.startMs, endMs: chapters.endMs, stepId: chapters.stepId, operation: chapters.operation,
    confidence: chapters.confidence, evidence: chapters.evidence, alternatives: chapters.alternatives, proposed: chapters.proposed, version: chapters.version,
    partIds: sql<string[]>`coalesce((select array_agg(${chapterParts.partId} order by ${chapterParts.partId}) from ${chapterParts} where ${chapterParts.chapterId} = ${chapters.id}), '{}')`,
  }).from(chapters).where(eq(chapters.sessionId, sessionId)).orderBy(chapters.clipId, chapters.startMs).for('update')
  const walls: Stretch[] = [...rows.filter(row => !row.proposed), ...await tx.select({ clipId: dismissals.clipId, startMs: dismissals.startMs, endMs: dismissals.endMs }).from(dismissals).where(eq(dismissals.sessionId, sessionId))]
  const fresh = besideWalls(proposals.filter(one => !one.fixed).map(one => toFields(one, material)), walls, SHORTEST_CHAPTER_MS)
  const { standing, added, gone } = matchStretches(rows.filter(row => row.proposed), fresh, (old, one) => old.stepId === one.stepId && old.operation === one.operation)

  // Neighbours exchange their edge in one go: whether they overlap is asked at the end.
  await tx.execute(sql`set constraints chapters_never_overlap deferred`)
  const touched = new Set<string>()
  const changed: string[] = []
  if (gone.length) await tx.delete(chapters).where(inArray(chapters.id, gone.map(row => row.id)))
  for (const row of gone) touched.add(row.clipId)
  for (const { old, fresh: { partIds, ...fields } } of standing) {
    const seen = !(['startMs', 'endMs', 'stepId', 'operation'] as const).every(key => old[key] === fields[key]) || old.partIds.join() !== partIds.join()
    const told = old.confidence === fields.confidence && JSON.stringify([old.evidence, old.alternatives]) === JSON.stringify([fields.evidence, fields.alternatives])
    if (!seen && told) continue
    // How sure the program is may change under a reader's hand; the version is about what the chapter says.
    await tx.update(chapters).set({ ...fields, version: old.version + Number(seen), updatedBy: null }).where(eq(chapters.id, old.id))
    changed.push(old.id)
    if (!seen) continue
    touched.add(old.clipId)
    await tx.delete(chapterParts).where(eq(chapterParts.chapterId, old.id))
    await addParts(tx, old.id, partIds)
  }
  for (const { partIds, ...fields } of added) {
    const [row] = await tx.insert(chapters).values({ ...fields, sessionId, buildId: material.buildId, inking: 'pencilled', proposed: true }).returning({ id: chapters.id })
    await addParts(tx, row!.id, partIds)
    changed.push(row!.id)
    touched.add(fields.clipId)
  }
  await tx.execute(sql`set constraints chapters_never_overlap immediate`)
  for (const clipId of [...touched].sort()) await refreshPassages(tx, clipId)
  return { changed, removed: gone.map(row => row.id) }
}

async function addParts(tx: Transaction, chapterId: string, partIds: string[]): Promise<void> {
  if (partIds.length) await tx.insert(chapterParts).values(partIds.map(partId => ({ chapterId, partId })))
}

async function keepFacts(tx: Transaction, sessionId: string, material: PencilMaterial, heard: Pencilled['facts']): Promise<number> {
  const rows = await tx.select().from(facts).where(eq(facts.sessionId, sessionId)).orderBy(facts.atMs, facts.id).for('update')
  const fresh = heard.map(({ clip, atMs, kind, text, value, unit, step }) => ({ clipId: material.clips[clip]!.id, atMs: Math.round(atMs), kind, said: text.slice(0, 500), value, unit, stepId: material.stepOf(step) }))
  const { standing, added, gone } = matchMoments(rows, fresh, (old, one) => old.kind === one.kind && (old.said.toLowerCase() === one.said.toLowerCase() || (old.value !== null && old.value === one.value)))
  if (gone.length) await tx.delete(facts).where(inArray(facts.id, gone.map(row => row.id)))
  const changed = standing.filter(({ old, fresh: one }) => (['atMs', 'said', 'value', 'unit', 'stepId'] as const).some(key => old[key] !== one[key]))
  for (const { old, fresh: one } of changed) await tx.update(facts).set({ ...one, version: old.version + 1 }).where(eq(facts.id, old.id))
  if (added.length) await tx.insert(facts).values(added.map(one => ({ ...one, sessionId, buildId: material.buildId, proposed: true })))
  return gone.length + changed.length + added.length
}

async function keepPickups(tx: Transaction, sessionId: string, material: PencilMaterial, told: Pencilled['toldNotShown']): Promise<number> {
  const rows = await tx.select().from(pickups).where(eq(pickups.sessionId, sessionId)).orderBy(pickups.atMs, pickups.id).for('update')
  const fresh = told.map(({ clip, atMs, step, words }) => ({ clipId: material.clips[clip]!.id, atMs: Math.round(atMs), words: asCaptioned(material.input.clips[clip]!.cues, atMs, words), stepId: material.stepOf(step) }))
  const { standing, added, gone } = matchMoments(rows, fresh, () => true)
  if (gone.length) await tx.delete(pickups).where(inArray(pickups.id, gone.map(row => row.id)))
  const changed = standing.filter(({ old, fresh: one }) => (['atMs', 'words', 'stepId'] as const).some(key => old[key] !== one[key]))
  for (const { old, fresh: one } of changed) await tx.update(pickups).set({ ...one, version: old.version + 1 }).where(eq(pickups.id, old.id))
  if (added.length) await tx.insert(pickups).values(added.map(one => ({ ...one, sessionId, buildId: material.buildId, proposed: true })))
  return gone.length + changed.length + added.length
}

/** What was heard as the captions write it, with capitals and marks: as many captions as the heard words reach over. */
function asCaptioned(cues: PencilMaterial['input']['clips'][number]['cues'], atMs: number, heard: string): string {
  let text = ''
  for (let at = cues.findIndex(cue => cue.startMs === atMs); at >= 0 && at < cues.length && text.length < heard.trim().length - 2; at++) text = `${text} ${cues[at]!.text}`.trim()
  return (text || heard.trim()).replace(/\s+/g, ' ').slice(0, 500)
}
