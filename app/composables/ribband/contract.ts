import type { StepView } from '#shared/types/plan'
import type { ChapterView, ClipView, CueView } from '#shared/types/session'
import type { MayChange } from '#shared/utils/chapters/edits'
import type { SnapPoint } from '#shared/utils/ribband/snap'

/** What the ribband is given. Replace `cues` and `clips` rather than changing them in place. */
export interface RibbandProps {
  clips: ClipView[]
  chapters: ChapterView[]
  steps: StepView[]
  cues: CueView[]
  /** Playhead on the session's clock. */
  atMs: number
  selection?: SessionRange | null
  selectedChapterId?: string | null
  focusedClipId?: string | null
  /** For watching only: nothing can be moved or selected. */
  readOnly?: boolean
  /** Chapters whose edges can be moved; without it, all. */
  mayChange?: MayChange
}

/** In and out on the session's clock. */
export interface SessionRange { inMs: number, outMs: number }

/**
 * An edge of a chapter being moved, in ms of its clip. Sent on every move; the last has `done`. Apply that
 * one at once (and take it back if the server refuses): the strip forgets its own preview then.
 */
export interface EdgeMove { chapterId: string, edge: 'start' | 'end', clipMs: number, done: boolean, snapped: SnapPoint | null }

export interface ClipRange { clipId: string, startMs: number, endMs: number }

export interface RibbandEmits {
  'seek': [sessionMs: number, clipId: string]
  'select-chapter': [id: string]
  'move-edge': [move: EdgeMove]
  'select-range': [range: ClipRange]
}

/** Keys of the strip, for the page's list of keys. */
export const RIBBAND_KEYS: readonly { keys: string, does: string }[] = [
  { keys: 'Wheel', does: 'Over the ribband: zoom about the pointer (so do Ctrl wheel and two fingers apart or together). With nothing left to zoom the page scrolls' },
  { keys: 'Shift wheel', does: 'Over the ribband: move along it (so do a wheel turned sideways and a finger along it)' },
  { keys: '+ −', does: 'Zoom the ribband in and out' },
  { keys: '0', does: 'Show the whole session' },
  { keys: 'Shift ← →', does: 'Move along the ribband' },
  { keys: '← →', does: 'On the playhead: back or on by a second. On chapters: the one before or after. On an edge: move it by a tenth of a second' },
  { keys: '↑ ↓', does: 'On the playhead or an edge: on or back by a frame' },
  { keys: 'Page up, Page down', does: 'On the playhead: ten seconds on or back' },
  { keys: 'Home, End', does: 'First or last' },
]
