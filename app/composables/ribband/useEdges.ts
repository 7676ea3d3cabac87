import { shallowRef, type ShallowRef } from 'vue'
import { formatClock } from '#shared/utils/time/clock'
import { edgeLimits, snap, snapPoints, SNAP_WORDS, type SnapPoint } from '#shared/utils/ribband/snap'
import type { Strip, StripClip } from '#shared/utils/ribband/strip'
import { toClip } from '#shared/utils/ribband/clock'
import { fromLine } from '#shared/utils/ribband/line'
import type { EdgeMove } from './contract'
import type { Guide } from './drawing/drawOverlay'

const SNAP_PX = 9

interface EdgesInput {
  strip: () => Strip
  msPerPx: () => number
  atMs: () => number
  moved: (move: EdgeMove) => void
}

/** An edge in hand: where it may go, what it snaps to, what is shown meanwhile. */
export function useEdges(input: EdgesInput) {
  const preview: ShallowRef<EdgeMove | null> = shallowRef(null)
  const guide: ShallowRef<Guide | null> = shallowRef(null)
  let forget: ReturnType<typeof setTimeout> | undefined

  const chaptersOf = (clip: StripClip) => input.strip().planks[clip.lane]!.map(plank => plank.chapter)
  const find = (chapterId: string) => input.strip().planks.flat().find(plank => plank.chapter.id === chapterId)

  function pointsOf(clip: StripClip, except?: string): SnapPoint[] {
    const at = input.atMs()
    const playheadMs = at >= clip.startMs && at <= clip.endMs ? at - clip.startMs : null
    return snapPoints(clip.clip, clip.cues, chaptersOf(clip), { except, playheadMs })
  }

  /** Moves an edge to a place of its clip; `free` does not snap. */
  function move(chapterId: string, edge: 'start' | 'end', clipMs: number, options: { done: boolean, free: boolean }) {
    const plank = find(chapterId)
    const clip = plank && input.strip().byId.get(plank.chapter.clipId)
    if (!plank || !clip) return
    const limits = edgeLimits(plank.chapter, edge, chaptersOf(clip), clip.endMs - clip.startMs)
    const result = snap(clipMs, options.free ? [] : pointsOf(clip, chapterId), SNAP_PX * input.msPerPx(), limits)
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
    const limits = { min: 0, max: clip.endMs - clip.startMs }
    const [a, b] = [lineA, lineB].map(ms => snap(ms - clip.lineMs, points, tolerance, limits))
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

  return { preview, guide, move, range, settle, clipMsAt: (clip: StripClip, lineMs: number) => toClip(clip, fromLine(input.strip().line, lineMs)) }
}

export type Edges = ReturnType<typeof useEdges>
