import { computed, nextTick, ref, shallowRef, watch, type Ref } from 'vue'
import { useResizeObserver } from '@vueuse/core'
import { defaultRangeExtractor, useVirtualizer } from '@tanstack/vue-virtual'
import type { ChapterView } from '#shared/types/session'
import { findRows, nextFound, layTranscript, rowAt, type TranscriptRow } from '#shared/utils/transcript/rows'
import type { Player } from '../player/usePlayer'
import type { Captions } from './useCaptions'

/** A row's height before it has been measured, px: near enough that the scroll bar hardly moves when it is. */
function likelyHeight(row: TranscriptRow | undefined): number {
  const lines = Math.ceil((row?.cue.text.length ?? 1) / 64)
  return 12 + lines * 22 + (row?.opensChapter ? 26 : 0) + (row?.opensClip ? 25 : 0)
}

interface Input { player: Player, captions: Captions, chapters: () => ChapterView[], list: Ref<HTMLElement | null>, pinned: () => number | null }

/** The transcript as rows of which only those in sight exist, following the playback until the reader scrolls. */
export function useTranscript({ player, captions, chapters, list, pinned }: Input) {
  const rows = computed(() => layTranscript(player.placed.value, captions.cues.value, chapters()))
  const current = computed(() => rowAt(rows.value, player.clipId.value, player.clipMs.value))
  /** What is read beside the picture: before the first words of a clip, those. */
  const near = computed(() => current.value >= 0 ? current.value : rows.value.findIndex(row => row.cue.clipId === player.clipId.value))
  const following = ref(true)
  const heights = new Map<string, number>()

  const virtual = useVirtualizer(computed(() => ({
    count: rows.value.length,
    getScrollElement: () => list.value,
    estimateSize: (index: number) => likelyHeight(rows.value[index]),
    // Only what the browser's own observer reports: asking each new row for its height would lay the page out once a row.
    measureElement: (element: Element, entry: ResizeObserverEntry | undefined) => {
      const index = Number((element as HTMLElement).dataset.index)
      if (entry) heights.set(rows.value[index]?.cue.id ?? '', Math.round(entry.borderBoxSize[0]!.blockSize))
      return heights.get(rows.value[index]?.cue.id ?? '') ?? likelyHeight(rows.value[index])
    },
    getItemKey: (index: number) => rows.value[index]?.cue.id ?? index,
    overscan: 8,
    // The row that a selection began in stays, however far one drags: without it the browser lets the selection go.
    rangeExtractor: (range: Parameters<typeof defaultRangeExtractor>[0]) => {
      const shown = defaultRangeExtractor(range)
      const kept = pinned()
      return kept === null || kept >= range.count || shown.includes(kept) ? shown : [...shown, kept].sort((a, b) => a - b)
    },
  })))
  const items = computed(() => virtual.value.getVirtualItems())
  const height = computed(() => virtual.value.getTotalSize())

  function reveal(index: number, align: 'center' | 'auto' = 'center'): void {
    if (index < 0 || !list.value?.offsetParent) return
    virtual.value.scrollToIndex(index, { align })
  }
  watch(near, index => following.value && reveal(index), { flush: 'post' })
  watch(() => rows.value.length, async () => {
    await nextTick()
    if (following.value) reveal(near.value)
  })
  // What stands above the list comes and goes: what is said stays in sight.
  useResizeObserver(list, () => following.value && reveal(near.value))
  function follow(): void {
    following.value = true
    reveal(near.value)
  }
  /** The reader's own hand on the list. */
  function scrolledByHand(): void {
    following.value = false
  }
  const wanted = ref('')
  const found = computed(() => findRows(rows.value, wanted.value))
  const foundAt = ref(-1)
  /** The picture has been put to the place that is shown, and not only the list. */
  let wentThere = false
  watch(wanted, () => {
    wentThere = false
    foundAt.value = found.value.length ? Math.max(0, found.value.findIndex(index => index >= current.value)) : -1
    if (foundAt.value >= 0) goTo(found.value[foundAt.value]!)
  })
  function goTo(index: number): void {
    following.value = false
    reveal(index)
  }
  /** The next place found, or the one before: the list and the picture go there. */
  function findNext(by: 1 | -1): void {
    const index = nextFound(found.value.length, foundAt.value, by, wentThere)
    if (index === null) return
    wentThere = true
    foundAt.value = index
    goTo(found.value[index]!)
    seekTo(found.value[index]!)
  }

  function seekTo(index: number): void {
    const row = rows.value[index]
    if (row) player.enter(row.cue.clipId, row.cue.startMs)
  }

  return { rows, current, following, virtual, items, height, wanted, found, foundAt, editing: shallowRef<string | null>(null), follow, scrolledByHand, reveal, findNext, seekTo }
}

export type Transcript = ReturnType<typeof useTranscript>
