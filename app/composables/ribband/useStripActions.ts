import { shallowRef } from 'vue'
import type { MayChange } from '#shared/utils/chapters/edits'
import { clipAt, nearestClip, toClip } from '#shared/utils/ribband/clock'
import { fromLine, toLine } from '#shared/utils/ribband/line'
import { zoneAt, type StripLayout } from '#shared/utils/ribband/layout'
import { plankAt, type Strip, type StripClip } from '#shared/utils/ribband/strip'
import { fromX, toX, type View } from '#shared/utils/ribband/scale'
import type { Plank } from '#shared/utils/ribband/planks'
import type { ClipRange, SessionRange } from './contract'
import type { Edges } from './useEdges'
import type { Drag, Point, Press } from './useStripGestures'

const EDGE_PX = 6
/** Shorter than this on the screen is a slip of the hand, not a selection. */
const LEAST_RANGE_PX = 3

interface ActionsInput {
  strip: () => Strip
  layout: () => StripLayout
  view: () => View
  preferredLane: () => number
  selection: () => SessionRange | null
  readOnly: () => boolean
  mayChange: MayChange
  edges: Edges
  seek: (sessionMs: number, clipId: string) => void
  selectChapter: (id: string) => void
  selectRange: (range: ClipRange) => void
}

/** What a press, a drag and a tap mean where they happen. */
export function useStripActions(input: ActionsInput) {
  const hover = shallowRef<Point | null>(null)
  const hoveredPlank = shallowRef<Plank | null>(null)
  const { edges } = input

  /** Clip and time under a point; a point over an empty part of a band means the band that has footage. */
  function momentAt(point: Point): { clip: StripClip, sessionMs: number, lineMs: number } | null {
    const strip = input.strip()
    const lineMs = Math.min(Math.max(0, fromX(input.view(), point.x)), Math.max(0, strip.line.lengthMs - 1))
    const sessionMs = fromLine(strip.line, lineMs)
    const at = zoneAt(input.layout(), point.y)
    const lane = at.zone === 'planks' || at.zone === 'pictures' ? at.lane : input.preferredLane()
    const clip = nearestClip(strip.clips, sessionMs, lane)
    return clip && { clip, sessionMs: clip.startMs + toClip(clip, Math.round(sessionMs)), lineMs }
  }

  function plankUnder(point: Point): Plank | null {
    const at = zoneAt(input.layout(), point.y)
    return at.zone === 'planks' ? plankAt(input.strip().planks[at.lane] ?? [], fromX(input.view(), point.x)) : null
  }

  /** The edge within reach of a mouse: of two that meet, the one on the pointer's side. */
  function edgeUnder(point: Point): { plank: Plank, edge: 'start' | 'end' } | null {
    const at = zoneAt(input.layout(), point.y)
    if (at.zone !== 'planks' || input.readOnly()) return null
    const view = input.view()
    const reach = (plank: Plank) => Math.min(EDGE_PX, (plank.endMs - plank.startMs) / view.msPerPx / 4)
    const planks = input.strip().planks[at.lane] ?? []
    for (const x of [point.x, point.x - EDGE_PX, point.x + EDGE_PX]) {
      const plank = plankAt(planks, fromX(view, x))
      if (!plank || !input.mayChange(plank.chapter)) continue
      if (Math.abs(toX(view, plank.startMs) - point.x) <= reach(plank)) return { plank, edge: 'start' }
      if (Math.abs(toX(view, plank.endMs) - point.x) <= reach(plank)) return { plank, edge: 'end' }
    }
    return null
  }

  function scrub(): Drag {
    const go = (point: Point) => {
      hover.value = point
      const moment = momentAt({ x: point.x, y: 0 })
      if (moment) input.seek(moment.sessionMs, moment.clip.id)
    }
    return { move: go, end: done }
  }

  function edgeDrag(chapterId: string, edge: 'start' | 'end', start: Point): Drag | undefined {
    const plank = input.strip().planks.flat().find(one => one.chapter.id === chapterId)
    const clip = plank && input.strip().byId.get(plank.chapter.clipId)
    if (!plank || !clip) return undefined
    // The edge keeps its distance from the finger, which may have taken hold of the grip's rim.
    const grab = toX(input.view(), edge === 'start' ? plank.startMs : plank.endMs) - start.x
    const before = edge === 'start' ? plank.chapter.startMs : plank.chapter.endMs
    const to = (point: Point, event: PointerEvent, isDone: boolean) => {
      edges.move(chapterId, edge, fromX(input.view(), point.x + grab) - clip.lineMs, { done: isDone, free: event.altKey })
      showAtGuide(point)
    }
    let moved = false
    return {
      move(point, event) {
        moved ||= Math.abs(point.x - start.x) > 2
        if (moved) to(point, event, false)
      },
      end(point, event) {
        if (moved) to(point, event, true)
        else input.selectChapter(chapterId)
        done()
      },
      cancel() {
        if (moved) edges.move(chapterId, edge, before, { done: true, free: true })
        done()
      },
    }
  }

  function rangeDrag(clip: StripClip, fromLineMs: number): Drag {
    const to = (point: Point, event: PointerEvent) => {
      const range = edges.range(clip, fromLineMs, fromX(input.view(), point.x), event.altKey)
      showAtGuide(point)
      if (range.endMs - range.startMs >= LEAST_RANGE_PX * input.view().msPerPx) input.selectRange({ clipId: clip.id, ...range })
    }
    return { move: to, end: done, cancel: done }
  }

  function selectionDrag(end: 'in' | 'out'): Drag | undefined {
    const selection = input.selection()
    const strip = input.strip()
    const clip = selection && clipAt(strip.clips, (selection.inMs + selection.outMs) / 2, input.preferredLane())
    return clip ? rangeDrag(clip, toLine(strip.line, end === 'in' ? selection!.outMs : selection!.inMs)) : undefined
  }

  /** The picture shown is that of the place the edge has snapped to. */
  function showAtGuide(point: Point) {
    const guide = edges.guide.value
    hover.value = { x: guide ? toX(input.view(), guide.lineMs) : point.x, y: point.y }
  }

  function done() {
    edges.guide.value = null
    hover.value = null
    hoveredPlank.value = null
  }

  function press(point: Point, event: PointerEvent): Press {
    const grip = (event.target as HTMLElement).closest<HTMLElement>('[data-grip]')?.dataset
    if (grip?.grip === 'playhead') return { now: scrub() }
    if (grip?.grip === 'in' || grip?.grip === 'out') return { now: selectionDrag(grip.grip) }
    if (grip?.grip === 'start' || grip?.grip === 'end') return { now: edgeDrag(grip.chapter!, grip.grip, point) }
    const near = event.pointerType === 'mouse' && !event.altKey ? edgeUnder(point) : null
    if (near) return { now: edgeDrag(near.plank.chapter.id, near.edge, point) }

    const moment = momentAt(point)
    const zone = zoneAt(input.layout(), point.y).zone
    const plank = plankUnder(point)
    const select = () => moment && !input.readOnly() ? rangeDrag(moment.clip, moment.lineMs) : null
    const selects = event.pointerType === 'mouse' && (event.altKey || zone === 'sheer' || (zone === 'planks' && plank === null))
    return {
      drag: () => selects ? select() : null,
      hold: select,
      tap() {
        if (plank) input.selectChapter(plank.chapter.id)
        if (moment) input.seek(moment.sessionMs, moment.clip.id)
      },
    }
  }

  function onHover(point: Point | null) {
    hover.value = point
    hoveredPlank.value = point && plankUnder(point)
  }

  /** The cursor says what a press would do. */
  function cursorAt(point: Point | null): string {
    if (point === null) return 'default'
    if (edgeUnder(point)) return 'ew-resize'
    const { zone } = zoneAt(input.layout(), point.y)
    return zone === 'sheer' && !input.readOnly() ? 'crosshair' : 'pointer'
  }

  return { hover, hoveredPlank, press, onHover, momentAt, plankUnder, cursorAt }
}
