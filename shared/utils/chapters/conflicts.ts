import type { ChapterPut } from '#shared/schemas/chapters'
import type { ChapterView } from '#shared/types/session'
import { asPut, type Edit, SHORTEST_CHAPTER_MS } from './edits'

/** What the server said of an edit that somebody else was quicker than. */
export interface Changed { current: ChapterView[], gone: string[] }

/**
 * The same edit, made from the chapters as they now are: what was deleted meanwhile is made again,
 * what was to be deleted and is gone already is left out.
 */
export function overTheirs(edit: Edit, { current, gone }: Changed): Edit {
  const now = new Map(current.map(one => [one.id, one]))
  const lost = new Set(gone)
  return {
    ...edit,
    put: edit.put.map(one => lost.has(one.id) ? { ...one, version: null } : { ...one, version: now.get(one.id)?.version ?? one.version }),
    remove: edit.remove.filter(one => !lost.has(one.id)).map(one => now.get(one.id) ?? one),
  }
}

/** Whether an edit whose answer was lost on the way had in fact been applied: what stands is what it wanted. */
export function alreadyDone(edit: Edit, { current, gone }: Changed): boolean {
  const lost = new Set(gone)
  return edit.remove.every(one => lost.has(one.id))
    && edit.put.every(put => current.some(one => one.id === put.id && sameContent(put, one)))
}

function sameContent(put: ChapterPut, view: ChapterView): boolean {
  return (['clipId', 'startMs', 'endMs', 'stepId', 'operation', 'inking', 'note'] as const).every(key => put[key] === view[key])
    && [...put.partIds].sort().join() === [...view.partIds].sort().join()
}

/** The edit with the chapters that stand in its way cut back; those that would be left too short go. */
export function cuttingBack(edit: Edit, inTheWay: ChapterView[], newId: () => string): Edit {
  const put = [...edit.put]
  const remove = [...edit.remove]
  for (const other of inTheWay) {
    let rest = [{ startMs: other.startMs, endMs: other.endMs }]
    for (const one of edit.put.filter(one => one.clipId === other.clipId)) {
      rest = rest.flatMap(piece => [
        { startMs: piece.startMs, endMs: Math.min(piece.endMs, one.startMs) },
        { startMs: Math.max(piece.startMs, one.endMs), endMs: piece.endMs },
      ]).filter(piece => piece.endMs - piece.startMs >= SHORTEST_CHAPTER_MS)
    }
    const [first, ...others] = rest
    if (first) put.push(asPut(other, first), ...others.map(piece => asPut(other, { ...piece, id: newId(), version: null })))
    else remove.push(other)
  }
  return { ...edit, put, remove }
}
