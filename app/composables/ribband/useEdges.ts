import { shallowRef, type ShallowRef } from 'vue'
import type { ChapterView } from '#shared/types/session'
import { apply, edgeRange, type MayChange, moveEdge } from '#shared/utils/chapters/edits'
import { formatClock } from '#shared/utils/time/clock'
import { snap, snapPoints, SNAP_WORDS, type SnapPoint } from '#shared/utils/ribband/snap'
import type { Footage, StripClip } from '#shared/utils/ribband/strip'
import { toClip } from '#shared/utils/ribband/clock'
import { fromLine } from '#shared/utils/ribband/line'
import type { EdgeMove } from './contract'
import type { Guide } from './drawing/drawOverlay'

const SNAP_PX = 9

interface EdgesInput {
  footage: () => Footage
  /** As the page has them, without the edge in hand. */
  chapters: () => readonly ChapterView[]
  mayChange: MayChange
  msPerPx: () => number
  atMs: () => number
  moved: (move: EdgeMove) => void
}

/** An edge in hand: where it may go, what it snaps to, what is shown meanwhile. */
export function useEdges(input: EdgesInput) {
  const preview: ShallowRef<EdgeMove | null> = shallowRef(null)
  const guide: ShallowRef<Guide | null> = shallowRef(null)
  let forget: ReturnType<typeof setTimeout> | undefined

  function find(chapterId: string): { chapter: ChapterView, clip: StripClip, lengthMs: number } | null {
    const chapter = input.chapters().find(one => one.id === chapterId)
    const clip = chapter && input.footage().byId.get(chapter.clipId)
    return chapter && clip ? { chapter, clip, lengthMs: clip.endMs - clip.startMs } : null
  }

  function pointsOf(clip: StripClip, moved: { except?: string, butt?: number } = {}): SnapPoint[] {
    const at = input.atMs()
    const playheadMs = at >= clip.startMs && at <= clip.endMs ? at - clip.startMs : null
    return snapPoints(clip.clip, clip.cues, input.chapters(), { ...moved, playheadMs })
  }

  /** How far an edge can go, in ms of its clip: exactly as far as the edit takes it. */
  function limits(chapterId: string, edge: 'start' | 'end'): { min: number, max: number } {
    const found = find(chapterId)
    return found ? edgeRange(input.chapters(), found.chapter, edge, found.lengthMs, input.mayChange) : { min: 0, max: 0 }
  }

  /** The chapters with the edge in hand where it stands, and the neighbour it pushes or takes along. */
  function shown(): readonly ChapterView[] {
    const held = preview.value
    const found = held && find(held.chapterId)
    const edit = found && moveEdge(input.chapters(), found.chapter, held.edge, held.clipMs, found.lengthMs, input.mayChange)
    return edit ? apply(input.chapters(), edit) : input.chapters()
  }

  /** Moves an edge to a place of its clip; `free` does not snap. */
  function move(chapterId: string, edge: 'start' | 'end', clipMs: number, options: { done: boolean, free: boolean }) {
    const found = find(chapterId)
    if (!found) return
    const { chapter, clip } = found
    const points = options.free ? [] : pointsOf(clip, { except: chapterId, butt: edge === 'start' ? chapter.startMs : chapter.endMs })
    const result = snap(clipMs, points, SNAP_PX * input.msPerPx(), limits(chapterId, edge))
    const made: EdgeMove = { chapterId, edge, clipMs: result.ms, done: options.done, snapped: result.point }
    preview.value = made
    guide.value = options.done ? null : guideFor(clip, result.ms, result.point)
    input.moved(made)
    clearTimeout(forget)
    // Normally the chapters come back changed within this; if the page took the move back, so does the strip.
    if (options.done) forget = setTimeout(() => preview.value = null, 800)
  }

  /** A stretch of one clip between two places on the line, its ends snapped unless `free`. */
  function range(clip: StripClip, lineA: number, lineB: number, free: boolean): { startMs: number, endMs: number } {
    const points = free ? [] : pointsOf(clip)
    const tolerance = SNAP_PX * input.msPerPx()
    const [a, b] = [lineA, lineB].map(ms => snap(ms - clip.lineMs, points, tolerance, { min: 0, max: clip.endMs - clip.startMs }))
    guide.value = guideFor(clip, b!.ms, b!.point)
    return { startMs: Math.min(a!.ms, b!.ms), endMs: Math.max(a!.ms, b!.ms) }
  }

  function guideFor(clip: StripClip, clipMs: number, point: SnapPoint | null): Guide {
    const time = formatClock(clip.startMs + clipMs, { tenths: true })
    return { lineMs: clip.lineMs + clipMs, label: point ? `${time} ${SNAP_WORDS[point.kind]}` : time, snapped: point !== null }
  }

  function settle() {
    clearTimeout(forget)
    preview.value = null
  }

  return { preview, guide, limits, shown, move, range, settle, clipMsAt: (clip: StripClip, lineMs: number) => toClip(clip, fromLine(input.footage().line, lineMs)) }
}

export type Edges = ReturnType<typeof useEdges>
