import { onBeforeUnmount, onMounted, watch, type Ref, type ShallowRef } from 'vue'
import type { StripLayout } from '#shared/utils/ribband/layout'
import type { View } from '#shared/utils/ribband/scale'
import type { Strip } from '#shared/utils/ribband/strip'
import { drawFoot } from './drawing/drawFoot'
import { drawFolds, drawJoints, drawWords } from './drawing/drawMarks'
import { drawOverlay, type OverlayMarks } from './drawing/drawOverlay'
import { prepare, type Pen, type Theme } from './drawing/pen'
import { drawPictures, type SheetOf } from './drawing/drawPictures'
import { drawPlanks, type PlankMarks } from './drawing/drawPlanks'
import { drawSheer, type Sounds } from './drawing/drawSheer'
import { drawStations } from './drawing/drawStations'

interface DrawingInput {
  base: Ref<HTMLCanvasElement | null>
  overlay: Ref<HTMLCanvasElement | null>
  theme: ShallowRef<Theme | null>
  strip: () => Strip
  layout: () => StripLayout
  view: () => View
  sounds: () => Sounds
  full: () => number
  sheetOf: SheetOf
  /** Changes when further pictures are ready. */
  pictures: () => number
  planks: () => PlankMarks
  focusedClipId: () => string | null
  preferredLane: () => number
  marks: () => OverlayMarks
}

/** Draws the strip at most once a frame: the drawing itself when it changed, what moves over it apart. */
export function useStripDrawing(input: DrawingInput) {
  let frame = 0
  let baseStale = false

  function ask(base: boolean) {
    baseStale ||= base
    if (frame === 0 && typeof requestAnimationFrame === 'function') frame = requestAnimationFrame(draw)
  }

  function penOn(canvas: HTMLCanvasElement | null): Pen | null {
    const theme = input.theme.value
    const [layout, view] = [input.layout(), input.view()]
    const ctx = canvas && view.widthPx > 0 ? prepare(canvas, view.widthPx, layout.height) : null
    return ctx && theme && { ctx, theme, strip: input.strip(), layout, view }
  }

  function draw() {
    frame = 0
    if (baseStale) {
      baseStale = false
      const pen = penOn(input.base.value)
      if (pen) drawBase(pen)
    }
    drawMoving()
  }

  function drawMoving() {
    const marks = input.marks()
    const canvas = input.overlay.value
    if (!canvas) return
    // An empty canvas would still be laid over the drawing on every frame.
    const isEmpty = marks.selection === null && marks.guide === null && marks.hoverX === null
    canvas.style.visibility = isEmpty ? 'hidden' : ''
    const pen = isEmpty ? null : penOn(canvas)
    if (pen) drawOverlay(pen, marks)
  }

  function drawBase(pen: Pen) {
    if (pen.strip.clips.length === 0) return
    drawPictures(pen, input.sheetOf, input.focusedClipId())
    drawSheer(pen, input.sounds(), input.full())
    drawStations(pen)
    drawWords(pen, input.preferredLane())
    drawPlanks(pen, input.planks())
    drawJoints(pen)
    drawFoot(pen)
    drawFolds(pen)
  }

  watch([input.strip, input.layout, input.view, input.theme, input.sounds, input.full, input.pictures, input.focusedClipId, input.preferredLane,
    () => input.planks().selectedId, () => input.planks().hoveredId], () => ask(true))
  watch(() => input.marks(), () => ask(false))

  let ratio: MediaQueryList | undefined
  const onRatio = () => {
    ask(true)
    followRatio()
  }
  function followRatio() {
    ratio = matchMedia(`(resolution: ${devicePixelRatio}dppx)`)
    ratio.addEventListener('change', onRatio, { once: true })
  }
  onMounted(() => {
    followRatio()
    ask(true)
  })
  onBeforeUnmount(() => {
    ratio?.removeEventListener('change', onRatio)
    if (frame !== 0) cancelAnimationFrame(frame)
  })
}
