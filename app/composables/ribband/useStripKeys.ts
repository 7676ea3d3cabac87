import type { StripViewControl } from './useStripView'

const PAGE_PX = 0.5
const STEP = 1.5

/** Keys that move the drawing, wherever on the strip the focus is. Returns whether the key was one of them. */
export function useStripKeys(control: StripViewControl) {
  return (event: KeyboardEvent): boolean => {
    if (event.ctrlKey || event.metaKey || event.altKey) return false
    const page = control.view.value.widthPx * PAGE_PX
    const actions: Record<string, () => void> = {
      '+': () => control.zoomAtPlayhead(STEP),
      '=': () => control.zoomAtPlayhead(STEP),
      '-': () => control.zoomAtPlayhead(1 / STEP),
      '−': () => control.zoomAtPlayhead(1 / STEP),
      '0': control.showWhole,
      ...(event.shiftKey ? { ArrowLeft: () => control.pan(-page), ArrowRight: () => control.pan(page) } : {}),
    }
    const action = actions[event.key]
    if (!action) return false
    action()
    event.preventDefault()
    event.stopPropagation()
    return true
  }
}

/** How a slider's key moves a time: by `nearMs`, by a frame, by `farMs`, or to an end. Null for other keys. */
export function keyedTime(event: KeyboardEvent, at: number, by: { nearMs: number, frameMs: number, farMs: number, min: number, max: number }): number | null {
  if (event.ctrlKey || event.metaKey || event.altKey || event.shiftKey) return null
  const to: Record<string, number> = {
    ArrowLeft: at - by.nearMs, ArrowRight: at + by.nearMs,
    ArrowDown: at - by.frameMs, ArrowUp: at + by.frameMs,
    PageDown: at - by.farMs, PageUp: at + by.farMs,
    Home: by.min, End: by.max,
  }
  const wanted = to[event.key]
  if (wanted === undefined) return null
  event.preventDefault()
  event.stopPropagation()
  return Math.round(Math.min(by.max, Math.max(by.min, wanted)))
}
