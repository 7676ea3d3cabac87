import { onBeforeUnmount, onMounted, type Ref } from 'vue'

/** A place on the strip in CSS pixels from its top left. */
export interface Point { x: number, y: number }
export interface Drag { move: (point: Point, event: PointerEvent) => void, end: (point: Point, event: PointerEvent) => void, cancel?: () => void }
/** What a press can become. `now` takes hold at once; `drag` when the pointer moves; null pans. */
export interface Press { now?: Drag, drag?: () => Drag | null, hold?: () => Drag | null, tap?: () => void }

export interface GestureActions {
  press: (point: Point, event: PointerEvent) => Press
  hover: (point: Point | null) => void
  pan: (px: number) => boolean
  /** Pan and zoom answer whether anything moved. */
  zoom: (factor: number, x: number) => boolean
}

const MOVED_PX = { mouse: 4, touch: 9 }
const HOLD_MS = 450
const COASTING_PX_PER_MS = 0.25

/** How far a turn of the wheel goes on for: a page that scrolls under the pointer keeps the wheel that long. */
const TURN_MS = 250

/** Mouse, pen and fingers: one pans or takes hold, two pinch; the wheel zooms, sideways or with Shift it pans. */
export function useStripGestures(surface: Ref<HTMLElement | null>, actions: GestureActions) {
  const down = new Map<number, Point>()
  let press: Press | null = null
  let from: Point = { x: 0, y: 0 }
  let drag: Drag | 'pan' | 'pinch' | null = null
  let holdTimer: ReturnType<typeof setTimeout> | undefined
  let coasting = 0
  let speed = { px: 0, at: 0 }

  function point(event: { clientX: number, clientY: number }): Point {
    const box = surface.value!.getBoundingClientRect()
    return { x: event.clientX - box.left, y: event.clientY - box.top }
  }

  function onDown(event: PointerEvent) {
    if (event.pointerType === 'mouse' && event.button !== 0) return
    cancelAnimationFrame(coasting)
    down.set(event.pointerId, point(event))
    if (down.size === 2) return startPinch()
    if (down.size > 2) return
    from = point(event)
    press = actions.press(from, event)
    drag = press.now ?? null
    speed = { px: 0, at: event.timeStamp }
    if (drag) capture(event)
    else if (press.hold && event.pointerType !== 'mouse') holdTimer = setTimeout(() => takeHold(event), HOLD_MS)
  }

  function takeHold(event: PointerEvent) {
    const held = press?.hold?.()
    if (!held || drag) return
    drag = held
    capture(event)
  }

  function capture(event: PointerEvent) {
    try {
      surface.value?.setPointerCapture(event.pointerId)
    }
    catch {
      // The pointer is already up again; its end has come or will come by itself.
    }
  }

  function startPinch() {
    clearTimeout(holdTimer)
    if (drag && typeof drag === 'object') drag.cancel?.()
    press = null
    drag = 'pinch'
    actions.hover(null)
  }

  function onMove(event: PointerEvent) {
    const here = point(event)
    const before = down.get(event.pointerId)
    if (!before) {
      if (event.pointerType === 'mouse' && event.buttons === 0) actions.hover(here)
      return
    }
    if (drag === 'pinch') return pinch(event.pointerId, here)
    if (drag === null) {
      const far = Math.hypot(here.x - from.x, here.y - from.y)
      if (far < MOVED_PX[event.pointerType === 'mouse' ? 'mouse' : 'touch']) return
      clearTimeout(holdTimer)
      drag = press?.drag?.() ?? 'pan'
      capture(event)
    }
    if (drag === 'pan') {
      actions.pan(before.x - here.x)
      const elapsed = Math.max(1, event.timeStamp - speed.at)
      speed = { px: 0.7 * (before.x - here.x) / elapsed + 0.3 * speed.px, at: event.timeStamp }
      if (event.pointerType === 'mouse') actions.hover(here)
    }
    else drag.move(here, event)
    down.set(event.pointerId, here)
  }

  function pinch(id: number, here: Point) {
    const other = [...down].find(([key]) => key !== id)?.[1]
    const before = down.get(id)!
    down.set(id, here)
    if (!other) return
    const factor = Math.max(12, Math.abs(here.x - other.x)) / Math.max(12, Math.abs(before.x - other.x))
    actions.zoom(factor, (before.x + other.x) / 2)
    actions.pan((before.x - here.x) / 2)
  }

  function onUp(event: PointerEvent) {
    if (!down.has(event.pointerId)) return
    down.delete(event.pointerId)
    clearTimeout(holdTimer)
    if (drag === 'pinch') {
      if (down.size === 0) drag = null
      return
    }
    const cancelled = event.type === 'pointercancel'
    if (drag === null && !cancelled) press?.tap?.()
    else if (drag === 'pan') coast(event)
    else if (drag && cancelled) drag.cancel?.()
    else if (drag) drag.end(point(event), event)
    press = null
    drag = null
  }

  function coast(event: PointerEvent) {
    if (event.pointerType === 'mouse' || event.timeStamp - speed.at > 60 || Math.abs(speed.px) < COASTING_PX_PER_MS) return
    if (matchMedia('(prefers-reduced-motion: reduce)').matches) return
    let last = performance.now()
    const step = (now: number) => {
      const elapsed = Math.min(40, now - last)
      last = now
      if (!actions.pan(speed.px * elapsed)) return
      speed.px *= Math.exp(-elapsed / 260)
      if (Math.abs(speed.px) > 0.02) coasting = requestAnimationFrame(step)
    }
    coasting = requestAnimationFrame(step)
  }

  let pageTurnedAt = -Infinity
  /** While the page is being scrolled the strip passes under the pointer: it must not take the wheel then. */
  function onPageWheel(event: WheelEvent) {
    if (!surface.value?.contains(event.target as Node)) pageTurnedAt = event.timeStamp
  }

  function onWheel(event: WheelEvent) {
    const unit = event.deltaMode === 1 ? 16 : event.deltaMode === 2 ? 400 : 1
    const pinched = event.ctrlKey || event.metaKey
    // Left to the browser it would make the whole page larger.
    if (pinched) event.preventDefault()
    else if (event.timeStamp - pageTurnedAt < TURN_MS) {
      pageTurnedAt = event.timeStamp
      return
    }
    const sideways = !pinched && (event.shiftKey || Math.abs(event.deltaX) > Math.abs(event.deltaY))
    const turned = Math.max(-120, Math.min(120, event.deltaY * unit))
    const moved = sideways
      ? actions.pan((event.deltaX || event.deltaY) * unit)
      : actions.zoom(Math.exp(-turned / (pinched ? 160 : 250)), point(event).x)
    // At either end, and with nothing left to zoom, the wheel belongs to the page.
    if (moved) event.preventDefault()
    else pageTurnedAt = event.timeStamp
  }

  function onLeave(event: PointerEvent) {
    if (!down.has(event.pointerId)) actions.hover(null)
  }

  onMounted(() => {
    const element = surface.value!
    element.addEventListener('pointerdown', onDown)
    element.addEventListener('pointermove', onMove)
    element.addEventListener('pointerup', onUp)
    element.addEventListener('pointercancel', onUp)
    element.addEventListener('pointerleave', onLeave)
    element.addEventListener('wheel', onWheel, { passive: false })
    window.addEventListener('wheel', onPageWheel, { passive: true })
  })
  onBeforeUnmount(() => {
    clearTimeout(holdTimer)
    cancelAnimationFrame(coasting)
    window.removeEventListener('wheel', onPageWheel)
  })
}
