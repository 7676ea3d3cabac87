import { and, eq, inArray, notInArray, or, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { ChapterChanges, ChapterPut } from '#shared/schemas/chapters'
import type { ChapterView } from '#shared/types/session'
import { forbiddenIn, forbiddenWords, type Hand } from '#shared/utils/chapters/rights'
import { DomainError, notFound } from '#shared/utils/errors'
import type { Database, Executor, Transaction } from '../database/client'
import { chapterParts, chapters, clips, dismissals, parts, sessions, steps, users } from '../database/schema'
import { lockSession } from './clips'
import { announce } from './live'
import { realign } from './pencil/realign'
import { refreshPassages } from './search/passages'

/** What one set of changes came to. */
export interface ChapterOutcome {
  chapters: ChapterView[]
  removed: string[]
  /** What became of the program's own proposals around it. */
  realigned: { chapters: ChapterView[], removed: string[] }
}

/** Whoever changes chapters: an account, and what it is on the build. */
export type ChapterHand = Hand & { id: string }

const inkers = alias(users, 'inkers')

/** Chapters of a session in clip and time order. */
export async function listChapters(executor: Executor, where: { sessionId: string } | { ids: string[] }): Promise<ChapterView[]> {
  const rows = await executor
    .select({
      id: chapters.id, clipId: chapters.clipId, startMs: chapters.startMs, endMs: chapters.endMs, stepId: chapters.stepId, operation: chapters.operation,
      partIds: sql<string[]>`coalesce((select array_agg(${chapterParts.partId} order by ${chapterParts.partId}) from ${chapterParts} where ${chapterParts.chapterId} = ${chapters.id}), '{}')`,
      inking: chapters.inking, confidence: chapters.confidence, evidence: chapters.evidence, alternatives: chapters.alternatives, proposed: chapters.proposed, note: chapters.note, version: chapters.version,
      inkedBy: { id: inkers.id, name: inkers.name }, updatedBy: users.name,
    })
    .from(chapters)
    .leftJoin(users, eq(users.id, chapters.updatedBy))
    .leftJoin(inkers, eq(inkers.id, chapters.inkedBy))
    .where('sessionId' in where ? eq(chapters.sessionId, where.sessionId) : inArray(chapters.id, where.ids))
    .orderBy(chapters.clipId, chapters.startMs)
  return rows
}

/**
 * Applies everything that one action changes, whole or not at all. Nobody's work is overwritten unseen:
 * each change names the version it was made from. Crew change no chapter that another person has inked. What is the
 * program's own gives way to what a person puts, and the rest of it is then aligned anew around that.
 *
 * @throws DomainError `conflict` with `data.reason`: `changed` (somebody was quicker; `current` holds the chapters
 *   as they now are, `gone` the ids that are no more) or `overlap` (`with` holds the chapters in the way).
 *   `forbidden` when the hand may not change one of the chapters.
 */
export async function changeChapters(database: Database, sessionId: string, hand: ChapterHand, changes: ChapterChanges): Promise<ChapterOutcome> {
  try {
    const { structural, gaveWay, ...outcome } = await database.transaction(tx => applyChanges(tx, sessionId, hand, changes))
    const realigned = structural ? await realign(database, sessionId) : { changed: [], removed: [] }
    return { ...outcome, realigned: { chapters: realigned.changed.length ? await listChapters(database, { ids: realigned.changed }) : [], removed: [...gaveWay, ...realigned.removed] } }
  }
  catch (error) {
    if (isOverlap(error)) throw await overlapConflict(database, changes.put)
    throw error
  }
}

/** `structural`: something else is now said of the footage; a note alone is not. */
interface Applied extends Omit<ChapterOutcome, 'realigned'> { structural: boolean, gaveWay: string[] }

async function applyChanges(tx: Transaction, sessionId: string, hand: ChapterHand, changes: ChapterChanges): Promise<Applied> {
  // Before the locks of any chapters, as the program does when it moves its own.
  await lockSession(tx, sessionId)
  const [session] = await tx.select({ buildId: sessions.buildId }).from(sessions).where(eq(sessions.id, sessionId))
  if (!session) throw notFound('That session')
  await checkReferences(tx, sessionId, session.buildId, changes.put)
  if (hand.role !== 'builder') await checkRights(tx, sessionId, hand, changes)
  // Neighbours exchange their edge in one go: whether they overlap is asked at the end.
  await tx.execute(sql`set constraints chapters_never_overlap deferred`)

  const touched = new Set<string>()
  const stale: string[] = []
  let structural = changes.remove.length > 0
  for (const { id, version, overProposal, dismiss } of changes.remove) {
    // The program moves its own between two looks: against a person's word its version counts for nothing.
    const [gone] = await tx.delete(chapters).where(and(eq(chapters.id, id), eq(chapters.sessionId, sessionId), or(eq(chapters.version, version), chapters.proposed))).returning({ clipId: chapters.clipId, startMs: chapters.startMs, endMs: chapters.endMs })
    if (gone) touched.add(gone.clipId)
    else if (!overProposal) stale.push(id)
    if (gone && dismiss) await tx.insert(dismissals).values({ chapterId: id, sessionId, ...gone, createdBy: hand.id }).onConflictDoNothing()
  }
  if (changes.put.length) await tx.delete(dismissals).where(inArray(dismissals.chapterId, changes.put.map(put => put.id)))
  const gaveWay = await makeWay(tx, changes, touched)
  for (const put of changes.put) {
    const written = await writeChapter(tx, { sessionId, buildId: session.buildId, userId: hand.id }, put)
    if (!written) stale.push(put.id)
    structural ||= written?.structural ?? false
    for (const clip of written?.clips ?? []) touched.add(clip)
  }
  if (stale.length) {
    const current = (await listChapters(tx, { ids: stale })).filter(one => stale.includes(one.id))
    throw new DomainError('conflict', changedMessage(current), { reason: 'changed', current, gone: stale.filter(id => !current.some(one => one.id === id)) })
  }
  await tx.execute(sql`set constraints chapters_never_overlap immediate`)

  for (const clipId of touched) await refreshPassages(tx, clipId)
  for (const one of [...changes.put, ...changes.remove]) await announce(tx, { sessionId, kind: 'chapter', id: one.id, by: hand.id })
  return { chapters: changes.put.length ? await listChapters(tx, { ids: changes.put.map(put => put.id) }) : [], removed: changes.remove.map(one => one.id), structural, gaveWay }
}

/** The program's own goes where a person puts something else; it is proposed anew beside that. */
async function makeWay(tx: Transaction, changes: ChapterChanges, touched: Set<string>): Promise<string[]> {
  const named = changes.put.map(put => put.id)
  const gone: string[] = []
  for (const put of changes.put) {
    const rows = await tx.delete(chapters).where(and(eq(chapters.clipId, put.clipId), chapters.proposed, notInArray(chapters.id, named), sql`int4range(${chapters.startMs}, ${chapters.endMs}) && int4range(${put.startMs}, ${put.endMs})`)).returning({ id: chapters.id })
    if (rows.length) touched.add(put.clipId)
    gone.push(...rows.map(row => row.id))
  }
  return gone
}

/** Writes one chapter; returns the clips it touched, or null when its version is no longer the newest. */
async function writeChapter(tx: Transaction, context: { sessionId: string, buildId: string, userId: string }, put: ChapterPut): Promise<{ clips: string[], structural: boolean } | null> {
  const { id, version, partIds, overProposal, ...fields } = put
  const values = { ...fields, confidence: put.inking === 'inked' ? null : put.confidence, updatedBy: context.userId }
  const [standing] = version === null ? [] : await tx.select({
    clipId: chapters.clipId, startMs: chapters.startMs, endMs: chapters.endMs, stepId: chapters.stepId, operation: chapters.operation,
    inking: chapters.inking, inkedBy: chapters.inkedBy, proposed: chapters.proposed, version: chapters.version,
  }).from(chapters).where(and(eq(chapters.id, id), eq(chapters.sessionId, context.sessionId))).for('update')
  // A proposal that the program has taken away meanwhile is made by the person who wants it.
  if (version === null || (!standing && overProposal)) {
    const [row] = await tx.insert(chapters).values({ id, ...values, sessionId: context.sessionId, buildId: context.buildId, inkedBy: put.inking === 'inked' ? context.userId : null, createdBy: context.userId }).onConflictDoNothing({ target: chapters.id }).returning({ id: chapters.id })
    if (!row) return null
  }
  else {
    if (!standing || (standing.version !== version && !standing.proposed)) return null
    // Ink stays the first hand's: the builder who trims a chapter of the crew's does not take it from them.
    const inkedBy = put.inking === 'pencilled' ? null : standing.inking === 'inked' ? standing.inkedBy : context.userId
    await tx.update(chapters).set({ ...values, inkedBy, version: standing.version + 1 }).where(eq(chapters.id, id))
    await tx.delete(chapterParts).where(eq(chapterParts.chapterId, id))
  }
  if (partIds.length) await tx.insert(chapterParts).values([...new Set(partIds)].map(partId => ({ chapterId: id, partId })))
  const structural = !standing || (['clipId', 'startMs', 'endMs', 'stepId', 'operation', 'inking', 'proposed'] as const).some(key => standing[key] !== put[key])
  return { clips: [put.clipId, ...(standing ? [standing.clipId] : [])], structural }
}

/** Locks what is to be changed, so that nobody inks it between this look and the change. */
async function checkRights(tx: Transaction, sessionId: string, hand: ChapterHand, changes: ChapterChanges): Promise<void> {
  const ids = [...changes.put, ...changes.remove].map(one => one.id)
  await tx.select({ id: chapters.id }).from(chapters).where(and(inArray(chapters.id, ids), eq(chapters.sessionId, sessionId))).orderBy(chapters.id).for('update')
  const stood = await listChapters(tx, { ids })
  const [other] = forbiddenIn(changes, stood, hand)
  if (other) throw new DomainError('forbidden', `${forbiddenWords(other)} Nothing was changed.`, { chapterId: other.id })
}

/** Clips, steps and parts must be of this very session and build, and times within the clip. */
async function checkReferences(tx: Transaction, sessionId: string, buildId: string, puts: ChapterPut[]): Promise<void> {
  const wanted = { clips: [...new Set(puts.map(put => put.clipId))], steps: [...new Set(puts.flatMap(put => put.stepId ?? []))], parts: [...new Set(puts.flatMap(put => put.partIds))] }
  // One after the other: a transaction has one connection.
  const clipRows = wanted.clips.length ? await tx.select({ id: clips.id, durationMs: clips.durationMs, name: clips.name }).from(clips).where(and(inArray(clips.id, wanted.clips), eq(clips.sessionId, sessionId))) : []
  const stepRows = wanted.steps.length ? await tx.select({ id: steps.id }).from(steps).where(and(inArray(steps.id, wanted.steps), eq(steps.buildId, buildId))) : []
  const partRows = wanted.parts.length ? await tx.select({ id: parts.id }).from(parts).where(and(inArray(parts.id, wanted.parts), eq(parts.buildId, buildId))) : []
  if (clipRows.length < wanted.clips.length) throw new DomainError('bad-input', 'That clip is not in this session. Nothing was changed.')
  if (stepRows.length < wanted.steps.length) throw new DomainError('bad-input', 'That step is not in this build\'s plan. Nothing was changed.')
  if (partRows.length < wanted.parts.length) throw new DomainError('bad-input', 'That part is not in this build. Nothing was changed.')
  for (const put of puts) {
    const clip = clipRows.find(row => row.id === put.clipId)!
    if (clip.durationMs !== null && put.endMs > clip.durationMs) throw new DomainError('bad-input', `The out point lies beyond the end of ${clip.name}. Nothing was changed.`, { issues: [{ path: 'endMs', message: 'Beyond the end of the clip' }] })
  }
}

function changedMessage(current: ChapterView[]): string {
  const who = current.find(one => one.updatedBy)?.updatedBy
  if (!current.length) return 'Somebody has deleted this chapter in the meantime. Your change was not saved; you can mark it again.'
  return `${who ?? 'Somebody'} changed this chapter in the meantime. Your change was not saved: keep theirs, or put yours over it.`
}

function isOverlap(error: unknown): boolean {
  for (let cause = error as { constraint?: string, cause?: unknown } | undefined; cause; cause = cause.cause as typeof cause) {
    if (cause.constraint === 'chapters_never_overlap') return true
  }
  return false
}

async function overlapConflict(executor: Executor, puts: ChapterPut[]): Promise<DomainError> {
  const named = new Set(puts.map(put => put.id))
  const ids: string[] = []
  for (const put of puts) {
    const rows = await executor.select({ id: chapters.id }).from(chapters)
      .where(and(eq(chapters.clipId, put.clipId), sql`int4range(${chapters.startMs}, ${chapters.endMs}) && int4range(${put.startMs}, ${put.endMs})`))
    ids.push(...rows.map(row => row.id).filter(id => !named.has(id)))
  }
  const inTheWay = ids.length ? await listChapters(executor, { ids }) : []
  return new DomainError('conflict', 'This stretch is already taken by another chapter. Nothing was changed: shorten one of the two, or let the new one take the place.', { reason: 'overlap', with: inTheWay })
}
