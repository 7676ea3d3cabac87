import { computed, shallowRef, watch } from 'vue'
import type { Footage } from '#shared/utils/ribband/strip'
import { toLine } from '#shared/utils/ribband/line'
import { holdView, panBy, reveal, showRange, toX, wholeScale, wholeView, zoomAt, type View } from '#shared/utils/ribband/scale'

/** A jump of the playhead by more than this is a seek, which the strip follows; less is playback. */
const SEEK_MS = 1500

/** What of the line is in sight, and how it is moved. */
export function useStripView(strip: () => Footage, width: () => number, atMs: () => number) {
  const view = shallowRef<View>({ startMs: 0, msPerPx: 1, widthPx: 0 })
  const length = () => strip().line.lengthMs
  let whole = true

  function set(next: View) {
    const held = holdView(next, length())
    whole = held.msPerPx >= wholeScale(length(), held.widthPx) * 0.999
    if (held.startMs !== view.value.startMs || held.msPerPx !== view.value.msPerPx || held.widthPx !== view.value.widthPx) view.value = held
  }

  watch([strip, width], () => {
    // The whole session stays whole when a clip is added; a close view stays where it is.
    if (whole || view.value.widthPx === 0) set(wholeView(length(), width()))
    else set({ ...view.value, widthPx: width() })
  }, { immediate: true, flush: 'sync' })

  watch(atMs, (now, before) => {
    const line = strip().line
    const x = toX(view.value, toLine(line, now))
    if (x >= 0 && x <= view.value.widthPx) return
    const was = toX(view.value, toLine(line, before))
    const wasInSight = was >= 0 && was <= view.value.widthPx
    if (Math.abs(now - before) > SEEK_MS) set(reveal(view.value, toLine(line, now), length()))
    // Playing on past the edge turns the page, rather than sliding the drawing under the eye.
    else if (wasInSight) set(panBy(view.value, x - view.value.widthPx * 0.08, length()))
  })

  return {
    view,
    isWhole: computed(() => view.value.msPerPx >= wholeScale(length(), view.value.widthPx) * 0.999),
    set,
    pan: (px: number) => set(panBy(view.value, px, length())),
    zoom: (factor: number, x = view.value.widthPx / 2) => set(zoomAt(view.value, factor, x, length())),
    /** Zooms about the playhead when it is in sight, else about the middle. */
    zoomAtPlayhead(factor: number) {
      const x = toX(view.value, toLine(strip().line, atMs()))
      set(zoomAt(view.value, factor, x >= 0 && x <= view.value.widthPx ? x : view.value.widthPx / 2, length()))
    },
    showWhole: () => set(wholeView(length(), view.value.widthPx)),
    show: (startMs: number, endMs: number) => set(showRange(view.value, startMs, endMs, length())),
    reveal: (lineMs: number) => set(reveal(view.value, lineMs, length())),
  }
}

export type StripViewControl = ReturnType<typeof useStripView>
