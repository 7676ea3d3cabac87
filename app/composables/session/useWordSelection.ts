import { computed, ref, shallowRef, type Ref } from 'vue'
import { useEventListener } from '@vueuse/core'
import { spokenRange, type TextPoint } from '#shared/utils/transcript/selection'
import type { TranscriptRow } from '#shared/utils/transcript/rows'

/** Words selected across captions, by mouse, finger, or Shift and arrow keys on whole captions. */
export function useWordSelection(list: Ref<HTMLElement | null>, rows: () => readonly TranscriptRow[]) {
  const ends = shallowRef<[TextPoint, TextPoint] | null>(null)
  /** Row where the selection began. */
  const pinned = ref<number | null>(null)
  /** While the pointer is down nothing is offered: what appears under it would change what it selects. */
  const dragging = ref(false)
  const range = computed(() => dragging.value ? null : ends.value && spokenRange(rows(), ...ends.value))
  useEventListener(list, 'pointerdown', () => dragging.value = true)
  useEventListener(() => import.meta.client ? window : null, ['pointerup', 'pointercancel', 'dragend'], () => dragging.value = false)

  function pointOf(node: Node | null, offset: number): TextPoint | null {
    const element = node instanceof Element ? node : node?.parentElement
    const text = element?.closest<HTMLElement>('[data-cue-text]')
    if (!node || !text || !list.value?.contains(text)) {
      // A drag that ends beside the words means the whole row.
      const row = element?.closest<HTMLElement>('[data-row]')
      return row && list.value?.contains(row) ? { index: Number(row.dataset.row), offset: 0 } : null
    }
    const before = document.createRange()
    before.setStart(text, 0)
    before.setEnd(node, offset)
    return { index: Number(text.closest<HTMLElement>('[data-row]')!.dataset.row), offset: before.toString().length }
  }

  useEventListener(() => import.meta.client ? document : null, 'selectionchange', () => {
    const selection = document.getSelection()
    // A selection elsewhere on the page, such as in the find entry, leaves ours as it is.
    if (!selection?.anchorNode || !list.value?.contains(selection.anchorNode)) return
    if (selection.isCollapsed) {
      if (byKeys.value === null) clear(false)
      return
    }
    byKeys.value = null
    const anchor = pointOf(selection.anchorNode, selection.anchorOffset)
    const focus = pointOf(selection.focusNode, selection.focusOffset)
    if (!anchor) return
    pinned.value = anchor.index
    if (focus) ends.value = [anchor, focus]
  })

  const byKeys = ref<{ from: number, to: number } | null>(null)
  function extend(from: number, to: number): void {
    document.getSelection()?.removeAllRanges()
    const start = byKeys.value?.from ?? from
    byKeys.value = { from: start, to }
    const [low, high] = [Math.min(start, to), Math.max(start, to)]
    ends.value = [{ index: low, offset: 0 }, { index: high, offset: Number.MAX_SAFE_INTEGER }]
  }
  const holds = (index: number) => byKeys.value !== null && index >= Math.min(byKeys.value.from, byKeys.value.to) && index <= Math.max(byKeys.value.from, byKeys.value.to)

  function clear(withBrowser = true): void {
    ends.value = null
    pinned.value = null
    byKeys.value = null
    if (withBrowser) document.getSelection()?.removeAllRanges()
  }

  return { range, pinned, extend, holds, clear }
}
