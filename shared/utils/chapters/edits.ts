import type { ChapterPut } from '#shared/schemas/chapters'
import type { ChapterView } from '#shared/types/session'

/**
 * Every edit of chapters as plain data: what is put, what is removed. Pure, so that the page can show the result
 * at once, the server apply it whole, and undo be another edit. All times are integer ms of the clip, half open.
 */
export interface Edit {
  /** For the undo button: "Split step 7, glue". */
  label: string
  put: ChapterPut[]
  remove: ChapterView[]
  /** What is removed is not to be proposed again; `takes-back` is the edit that undoes such a one. */
  dismissal?: 'says' | 'takes-back'
}

/** The shortest chapter that an edit may leave, ms: shorter ones cannot be seen or clicked. */
export const SHORTEST_CHAPTER_MS = 200

export type Tag = Pick<ChapterPut, 'stepId' | 'operation' | 'partIds'>

export function asPut(view: ChapterView, changes: Partial<ChapterPut> = {}): ChapterPut {
  const { updatedBy: _updatedBy, inkedBy: _inkedBy, ...rest } = view
  return { ...rest, ...changes, overProposal: view.proposed }
}

/** A change by hand makes a chapter inked. */
const inked = { inking: 'inked', confidence: null, proposed: false } as const

/**
 * Marks [startMs, endMs) of a clip as a new inked chapter. What was there gives way: chapters wholly inside go,
 * others are cut back, one that stands round it is parted in two.
 */
export function mark(chapters: ChapterView[], clipId: string, startMs: number, endMs: number, tag: Tag, newId: () => string, note = ''): Edit {
  const { put, remove } = makeRoom(chapters, clipId, startMs, endMs, newId)
  return { label: 'Mark chapter', put: [...put, { id: newId(), clipId, startMs, endMs, ...tag, ...inked, evidence: [], alternatives: { steps: [], operations: [] }, overProposal: false, note, version: null }], remove }
}

/** The inked chapters that marking [startMs, endMs) would cut: worth a question before it happens. */
export function inkedInTheWay(chapters: ChapterView[], clipId: string, startMs: number, endMs: number): ChapterView[] {
  return chapters.filter(one => one.clipId === clipId && one.inking === 'inked' && one.startMs < endMs && one.endMs > startMs)
}

function makeRoom(chapters: ChapterView[], clipId: string, startMs: number, endMs: number, newId: () => string): { put: ChapterPut[], remove: ChapterView[] } {
  const put: ChapterPut[] = []
  const remove: ChapterView[] = []
  for (const one of chapters) {
    if (one.clipId !== clipId || one.startMs >= endMs || one.endMs <= startMs) continue
    const before = startMs - one.startMs >= SHORTEST_CHAPTER_MS
    const after = one.endMs - endMs >= SHORTEST_CHAPTER_MS
    if (before) put.push(asPut(one, { endMs: startMs }))
    if (after) put.push(before ? asPut(one, { id: newId(), startMs: endMs, version: null }) : asPut(one, { startMs: endMs }))
    if (!before && !after) remove.push(one)
  }
  return { put, remove }
}

/** Other step, operation or parts; inks it. */
export function retag(chapter: ChapterView, tag: Partial<Tag> & { note?: string }): Edit {
  const operation = tag.operation ?? chapter.operation
  const stepId = operation === 'none' ? null : tag.stepId === undefined ? chapter.stepId : tag.stepId
  return { label: 'Change chapter', put: [asPut(chapter, { ...tag, operation, stepId, ...inked })], remove: [] }
}

export function ink(chapters: ChapterView[]): Edit {
  return { label: chapters.length === 1 ? 'Ink chapter' : `Ink ${chapters.length} chapters`, put: chapters.map(one => asPut(one, inked)), remove: [] }
}

/** Parts a chapter in two at atMs; null when either side would be too short. What was a proposal is now a person's pencil, which stays. */
export function split(chapter: ChapterView, atMs: number, newId: () => string): Edit | null {
  if (atMs - chapter.startMs < SHORTEST_CHAPTER_MS || chapter.endMs - atMs < SHORTEST_CHAPTER_MS) return null
  return { label: 'Split chapter', put: [asPut(chapter, { endMs: atMs, proposed: false }), asPut(chapter, { id: newId(), startMs: atMs, version: null, proposed: false })], remove: [] }
}

/** Joins a chapter with the next one of its clip (bridging a gap between them), keeping the first one's step and operation. */
export function join(chapters: ChapterView[], chapter: ChapterView): Edit | null {
  const next = nextOf(chapters, chapter)
  if (!next) return null
  const notes = [chapter.note, next.note].filter(Boolean).join('\n')
  return { label: 'Join chapters', put: [asPut(chapter, { endMs: next.endMs, partIds: [...new Set([...chapter.partIds, ...next.partIds])], note: notes, ...inked })], remove: [next] }
}

export function remove(chapter: ChapterView): Edit {
  return { label: 'Delete chapter', put: [], remove: [chapter], dismissal: 'says' }
}

/** What an edge may not push: the chapters that whoever moves it may not change. */
export type MayChange = (chapter: ChapterView) => boolean
const anyChapter: MayChange = () => true

/** The chapter that an edge looks towards. */
function neighbourAt(chapters: readonly ChapterView[], chapter: ChapterView, edge: 'start' | 'end'): ChapterView | undefined {
  return edge === 'start' ? previousOf(chapters, chapter) : nextOf(chapters, chapter)
}

/**
 * How far an edge can go, in ms of the clip, both ends included: into its neighbour until that is as short as a
 * chapter may be (up to it, where it may not be changed), and towards its own other edge as far. An edge with no
 * room at all stays: both ends are its place.
 */
export function edgeRange(chapters: readonly ChapterView[], chapter: ChapterView, edge: 'start' | 'end', clipEndMs: number, mayChange = anyChapter): { min: number, max: number } {
  const neighbour = neighbourAt(chapters, chapter, edge)
  const pushes = neighbour && mayChange(neighbour)
  const place = edge === 'start' ? chapter.startMs : chapter.endMs
  const range = edge === 'start'
    ? { min: neighbour ? (pushes ? neighbour.startMs + SHORTEST_CHAPTER_MS : neighbour.endMs) : 0, max: chapter.endMs - SHORTEST_CHAPTER_MS }
    : { min: chapter.startMs + SHORTEST_CHAPTER_MS, max: neighbour ? (pushes ? neighbour.endMs - SHORTEST_CHAPTER_MS : neighbour.startMs) : clipEndMs }
  return range.min > range.max ? { min: place, max: place } : range
}

/**
 * Moves one edge. A neighbour that touches moves with it (the butt stays closed); one further off is only
 * pushed when reached, and never to less than the shortest chapter: the edge stops there. One that may not be
 * changed stays where it is.
 */
export function moveEdge(chapters: readonly ChapterView[], chapter: ChapterView, edge: 'start' | 'end', toMs: number, clipEndMs: number, mayChange = anyChapter): Edit | null {
  const { min, max } = edgeRange(chapters, chapter, edge, clipEndMs, mayChange)
  const ms = Math.round(Math.min(max, Math.max(min, toMs)))
  if (ms === (edge === 'start' ? chapter.startMs : chapter.endMs)) return null
  const put = [asPut(chapter, edge === 'start' ? { startMs: ms, ...inked } : { endMs: ms, ...inked })]
  const neighbour = neighbourAt(chapters, chapter, edge)
  if (!neighbour || !mayChange(neighbour)) return { label: 'Move edge', put, remove: [] }
  if (edge === 'start' && (neighbour.endMs === chapter.startMs || neighbour.endMs > ms)) put.push(asPut(neighbour, { endMs: ms }))
  if (edge === 'end' && (neighbour.startMs === chapter.endMs || neighbour.startMs < ms)) put.push(asPut(neighbour, { startMs: ms }))
  return { label: 'Move edge', put, remove: [] }
}

export function nextOf(chapters: readonly ChapterView[], chapter: ChapterView): ChapterView | undefined {
  return chapters.filter(one => one.clipId === chapter.clipId && one.startMs >= chapter.endMs).sort((a, b) => a.startMs - b.startMs)[0]
}

export function previousOf(chapters: readonly ChapterView[], chapter: ChapterView): ChapterView | undefined {
  return chapters.filter(one => one.clipId === chapter.clipId && one.endMs <= chapter.startMs).sort((a, b) => b.endMs - a.endMs)[0]
}

/** Chapters after an edit, as the page shows them before the server has answered. */
export function apply(chapters: readonly ChapterView[], edit: Pick<Edit, 'put' | 'remove'>): ChapterView[] {
  const gone = new Set(edit.remove.map(one => one.id))
  const put = new Map(edit.put.map(one => [one.id, one]))
  const kept = chapters.filter(one => !gone.has(one.id)).map((one) => {
    const next = put.get(one.id)
    put.delete(one.id)
    return next ? { ...one, ...asShown(next), version: one.version } : one
  })
  const fresh = [...put.values()].map(one => ({ ...asShown(one), version: one.version ?? 0, inkedBy: null, updatedBy: null }))
  return givingWay([...kept, ...fresh], edit.put).sort((a, b) => a.clipId.localeCompare(b.clipId) || a.startMs - b.startMs)
}

function asShown({ overProposal: _, ...put }: ChapterPut) {
  return put
}

/** The program's own gives way to what a person puts, as it does on the server, and is proposed anew beside it. */
function givingWay(chapters: ChapterView[], puts: readonly ChapterPut[]): ChapterView[] {
  const ids = new Set(puts.map(put => put.id))
  return chapters.filter(one => !one.proposed || ids.has(one.id) || !puts.some(put => put.clipId === one.clipId && put.startMs < one.endMs && put.endMs > one.startMs))
}

/**
 * The edit that takes `edit` back, given the chapters before it and as they are now (for their versions).
 * Null when somebody has since changed one of them: undoing would overwrite their work. What was and is the program's
 * own is nobody's work: where it has moved since, it stays as it is and is proposed anew around what is undone.
 */
export function inverse(edit: Edit, before: ChapterView[], now: ChapterView[], versionsAfter: Map<string, number>): Edit | null {
  const put: ChapterPut[] = edit.remove.map(one => asPut(one, { version: null }))
  const remove: ChapterView[] = []
  for (const changed of edit.put) {
    const current = now.find(one => one.id === changed.id)
    const old = before.find(one => one.id === changed.id)
    const moved = !current || current.version !== versionsAfter.get(changed.id)
    if (moved && changed.proposed && (!current || current.proposed)) {
      if (current && !old) remove.push(current)
      continue
    }
    if (moved) return null
    if (old) put.push(asPut(old, { version: current.version }))
    else remove.push(current)
  }
  const dismissal = edit.dismissal === 'says' ? 'takes-back' as const : edit.dismissal === 'takes-back' ? 'says' as const : undefined
  return { label: edit.label, put, remove, ...(dismissal ? { dismissal } : {}) }
}
