import type { Span } from '../../types/media'
import { clamp, lowerBound } from './search'

export const SNAP_KINDS = ['neighbour', 'playhead', 'cue-start', 'cue-end', 'scene', 'silence', 'clip'] as const
export type SnapKind = typeof SNAP_KINDS[number]

/** A time of a clip worth meeting exactly, in clip ms. */
export interface SnapPoint { ms: number, kind: SnapKind }

/** What a snapped edge met, in words. */
export const SNAP_WORDS: Record<SnapKind, string> = {
  'neighbour': 'meets the next chapter',
  'playhead': 'at the playhead',
  'cue-start': 'where words begin',
  'cue-end': 'where words end',
  'scene': 'where the picture changes',
  'silence': 'at the edge of a silence',
  'clip': 'at the clip’s end',
}

interface SnapClip { id: string, durationMs: number | null, sceneChangesMs: readonly number[], silences: readonly Span[] }
interface SnapChapter { id: string, clipId: string, startMs: number, endMs: number }
interface SnapCue { clipId: string, startMs: number, endMs: number }

/**
 * All times of a clip that an edge may snap to, in order. Of several kinds within the same millisecond the
 * first of SNAP_KINDS stays. `except` is the chapter whose edge is moved: it does not snap to itself, nor to
 * `butt`, where a neighbour meets it now and moves along.
 */
export function snapPoints(clip: SnapClip, cues: readonly SnapCue[], chapters: readonly SnapChapter[], also: { except?: string, butt?: number, playheadMs?: number | null } = {}): SnapPoint[] {
  const end = clip.durationMs ?? 0
  const found: SnapPoint[] = [{ ms: 0, kind: 'clip' }, { ms: end, kind: 'clip' }]
  for (const chapter of chapters) {
    if (chapter.clipId !== clip.id || chapter.id === also.except) continue
    for (const ms of [chapter.startMs, chapter.endMs]) if (ms !== also.butt) found.push({ ms, kind: 'neighbour' })
  }
  for (const cue of cues) {
    if (cue.clipId === clip.id) found.push({ ms: cue.startMs, kind: 'cue-start' }, { ms: cue.endMs, kind: 'cue-end' })
  }
  for (const ms of clip.sceneChangesMs) found.push({ ms, kind: 'scene' })
  for (const span of clip.silences) found.push({ ms: span.startMs, kind: 'silence' }, { ms: span.endMs, kind: 'silence' })
  if (also.playheadMs !== undefined && also.playheadMs !== null) found.push({ ms: Math.round(also.playheadMs), kind: 'playhead' })
  return found
    .filter(point => point.ms >= 0 && point.ms <= end)
    .sort((a, b) => a.ms - b.ms || SNAP_KINDS.indexOf(a.kind) - SNAP_KINDS.indexOf(b.kind))
    .filter((point, index, all) => index === 0 || all[index - 1]!.ms !== point.ms)
}

export interface Snapped { ms: number, point: SnapPoint | null }

/** The nearest point within the tolerance and the limits, or the whole millisecond itself, held in the limits. */
export function snap(ms: number, points: readonly SnapPoint[], toleranceMs: number, limits: { min: number, max: number } = { min: 0, max: Number.MAX_SAFE_INTEGER }): Snapped {
  const held = Math.round(clamp(ms, limits.min, limits.max))
  let best: SnapPoint | null = null
  for (let index = lowerBound(points.length, i => points[i]!.ms, ms - toleranceMs); index < points.length; index++) {
    const point = points[index]!
    if (point.ms > ms + toleranceMs) break
    if (point.ms < limits.min || point.ms > limits.max) continue
    if (best === null || Math.abs(point.ms - ms) < Math.abs(best.ms - ms)) best = point
  }
  return best ? { ms: best.ms, point: best } : { ms: held, point: null }
}
