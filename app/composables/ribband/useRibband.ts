import { computed, toRaw, watch, type ComputedRef, type Ref } from 'vue'
import { frameToMs } from '#shared/utils/time/frames'
import { formatClock } from '#shared/utils/time/clock'
import { clipAt, nearestClip } from '#shared/utils/ribband/clock'
import { toLine } from '#shared/utils/ribband/line'
import { layoutStrip, type StripSize } from '#shared/utils/ribband/layout'
import { toX } from '#shared/utils/ribband/scale'
import type { ClipView } from '#shared/types/session'
import { OPERATION_WORDS } from '#shared/utils/operations'
import { cueAt, layChapters, layFootage, plankAt, type Strip } from '#shared/utils/ribband/strip'
import type { ClipRange, EdgeMove, RibbandProps } from './contract'
import { useEdges } from './useEdges'
import { useStripActions } from './useStripActions'
import { useStripView } from './useStripView'

interface Sends {
  seek: (sessionMs: number, clipId: string) => void
  selectChapter: (id: string) => void
  moveEdge: (move: EdgeMove) => void
  selectRange: (range: ClipRange) => void
}

/** A clip to be read raw at drawing time, after asking to be told when what is drawn of it changes. */
function followed(clip: ClipView): ClipView {
  void [clip.durationMs, clip.offsetMs, clip.camera, clip.name, clip.state, clip.sheets, clip.peaks, clip.silences, clip.sceneChangesMs, clip.video]
  return toRaw(clip)
}

export type Ribband = ReturnType<typeof useRibband>

/** The session laid on the line, the part in sight, and what is done with it; nothing of the page's elements. */
export function useRibband(props: RibbandProps, size: { width: Ref<number>, kind: Ref<StripSize> }, sends: Sends) {
  const footage = computed(() => {
    // Thousands of captions are read raw: following each through a proxy would cost more than laying them.
    void props.cues.length
    return layFootage(props.clips.map(followed), toRaw(props.cues))
  })
  const view = useStripView(() => footage.value, () => size.width.value, () => props.atMs)
  const edges = useEdges({
    chapters: () => props.chapters, mayChange: chapter => props.mayChange?.(chapter) ?? true,
    footage: () => footage.value, msPerPx: () => view.view.value.msPerPx, atMs: () => props.atMs, moved: sends.moveEdge,
  })

  const planking = computed(() => layChapters(footage.value, edges.shown(), props.steps))
  const strip: ComputedRef<Strip> = computed(() => ({ ...footage.value, ...planking.value }))
  watch(() => props.chapters, () => {
    if (edges.preview.value?.done) edges.settle()
  })

  const preferredLane = computed(() => (props.focusedClipId && footage.value.byId.get(props.focusedClipId)?.lane) || 0)
  const layout = computed(() => layoutStrip(footage.value.lanes.length, size.width.value, size.kind.value))
  const actions = useStripActions({
    strip: () => strip.value, layout: () => layout.value, view: () => view.view.value, edges,
    preferredLane: () => preferredLane.value, selection: () => props.selection ?? null, readOnly: () => props.readOnly === true, mayChange: chapter => props.mayChange?.(chapter) ?? true,
    seek: sends.seek, selectChapter: sends.selectChapter, selectRange: sends.selectRange,
  })

  const onLine = (sessionMs: number) => toLine(footage.value.line, sessionMs)
  const selectedPlank = computed(() => strip.value.planks.flat().find(plank => plank.chapter.id === props.selectedChapterId) ?? null)
  const selectionOnLine = computed(() => props.selection ? { startMs: onLine(props.selection.inMs), endMs: onLine(props.selection.outMs) } : null)

  const playheadX = computed(() => toX(view.view.value, onLine(props.atMs)))
  /** Clip and time under the pointer, or under the finger that holds something. */
  const hover = computed(() => actions.hover.value && actions.momentAt(actions.hover.value))

  /** What is at the playhead, for the words beside the strip and for screen readers. */
  const here = computed(() => {
    const clip = clipAt(strip.value.clips, props.atMs, preferredLane.value)
    const plank = clip && plankAt(strip.value.planks[clip.lane]!, clip.lineMs + props.atMs - clip.startMs)
    const operation = plank ? OPERATION_WORDS[plank.chapter.operation].label : ''
    const chapter = plank ? (plank.kind === 'bare' ? operation : [operation, plank.title].filter(Boolean).join(' · ')) : clip ? 'No chapter' : 'Between clips'
    const clock = formatClock(props.atMs, { tenths: true })
    return {
      clip, plank, chapter, clock: formatClock(props.atMs),
      spoken: [clock, plank?.number ? `step ${plank.number}` : '', chapter].filter(Boolean).join(', '),
      words: clip ? cueAt(clip, props.atMs - clip.startMs)?.text ?? '' : '',
    }
  })

  const frameMs = computed(() => {
    const rate = (here.value.clip ?? strip.value.clips[0])?.clip.video?.frameRate
    return rate ? frameToMs(1, { num: rate.numerator, den: rate.denominator }) : 40
  })

  /** Goes to a time of the session: into a clip, never between two. */
  function go(sessionMs: number) {
    const clip = nearestClip(strip.value.clips, sessionMs, preferredLane.value)
    if (clip) sends.seek(Math.min(Math.max(sessionMs, clip.startMs), clip.endMs - 1), clip.id)
  }

  function moveEdgeByKey(chapterId: string, edge: 'start' | 'end', clipMs: number) {
    edges.move(chapterId, edge, clipMs, { done: true, free: true })
  }

  function moveSelection(end: 'in' | 'out', sessionMs: number) {
    const selection = props.selection
    const clip = selection && clipAt(strip.value.clips, (selection.inMs + selection.outMs) / 2, preferredLane.value)
    if (!selection || !clip) return
    const [inMs, outMs] = end === 'in' ? [sessionMs, selection.outMs] : [selection.inMs, sessionMs]
    const held = (ms: number) => Math.min(Math.max(0, ms - clip.startMs), clip.endMs - clip.startMs)
    if (held(outMs) > held(inMs)) sends.selectRange({ clipId: clip.id, startMs: held(inMs), endMs: held(outMs) })
  }

  function showChapter(id: string) {
    const plank = strip.value.planks.flat().find(one => one.chapter.id === id)
    if (plank) view.show(plank.startMs, plank.endMs)
  }

  return {
    strip, layout, view, edges, actions, preferredLane, selectedPlank, selectionOnLine, here, frameMs, go, moveEdgeByKey, moveSelection, showChapter, playheadX, hover,
    clips: computed(() => footage.value.clips.map(clip => clip.clip)),
  }
}
