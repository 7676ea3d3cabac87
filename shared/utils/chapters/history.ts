import type { ChapterChanges } from '#shared/schemas/chapters'
import type { ChapterView } from '#shared/types/session'
import { type Edit, inverse } from './edits'

/** An edit that the server has taken: how its chapters were before, and their versions since. */
export interface Done { edit: Edit, before: ChapterView[], after: Map<string, number> }

export interface Outcome {
  chapters: ChapterView[]
  removed: string[]
  /** What the program has since proposed around it; null when it does so later. */
  realigned?: { chapters: ChapterView[], removed: string[] } | null
}

/** What travels to the server. A chapter that is new in the page carries no version there. */
export function asChanges(edit: Edit): ChapterChanges {
  return { put: edit.put, remove: edit.remove.map(({ id, version, proposed }) => ({ id, version, overProposal: proposed, dismiss: edit.dismissal === 'says' })) }
}

/** Chapters as they were before an edit: those that it changes or removes. */
export function touchedBy(edit: Edit, chapters: ChapterView[]): ChapterView[] {
  const ids = new Set([...edit.put, ...edit.remove].map(one => one.id))
  return chapters.filter(one => ids.has(one.id))
}

export function doneWith(edit: Edit, before: ChapterView[], outcome: Outcome): Done {
  return { edit, before, after: new Map(outcome.chapters.map(one => [one.id, one.version])) }
}

/** Chapters with the server's answer put in, in clip and time order. */
export function merge(chapters: ChapterView[], outcome: Outcome): ChapterView[] {
  // A proposal that was changed by hand may since have moved again: the later word counts.
  const fresh = new Map([...outcome.chapters, ...outcome.realigned?.chapters ?? []].map(one => [one.id, one]))
  const gone = new Set([...outcome.removed, ...outcome.realigned?.removed ?? []])
  return [...chapters.filter(one => !fresh.has(one.id)), ...fresh.values()].filter(one => !gone.has(one.id))
    .sort((a, b) => a.clipId.localeCompare(b.clipId) || a.startMs - b.startMs)
}

/** An edit that was made on top of another that was still on its way, now that the server has given versions. */
export function onTopOf(edit: Edit, sent: Edit, outcome: Outcome): Edit {
  const given = new Map(outcome.chapters.map(one => [one.id, one.version]))
  const named = new Map(sent.put.map(one => [one.id, one.version ?? 0]))
  const stamp = <One extends { id: string, version: number | null }>(one: One): One =>
    given.has(one.id) && (one.version ?? 0) === named.get(one.id) ? { ...one, version: given.get(one.id)! } : one
  return { ...edit, put: edit.put.map(stamp), remove: edit.remove.map(stamp) }
}

/** The edit that takes a done one back; null when somebody has changed one of its chapters since. */
export function takeBack(done: Done, now: ChapterView[]): Edit | null {
  return inverse(done.edit, done.before, now, done.after)
}

/**
 * Earlier edits after a later one was taken back: its chapters are as the earlier ones left them, only under
 * higher versions, so that taking back can go on.
 */
export function restamp(earlier: readonly Done[], reversed: Done, result: Done): Done[] {
  const before = new Map(reversed.before.map(one => [one.id, one.version]))
  return earlier.map(done => ({
    ...done,
    after: new Map([...done.after].map(([id, version]) => [id, before.get(id) === version ? result.after.get(id) ?? version : version])),
  }))
}
