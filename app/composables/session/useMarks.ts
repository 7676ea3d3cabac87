import { computed, shallowRef } from 'vue'
import type { ChapterView, CueView } from '#shared/types/session'
import { formatClock } from '#shared/utils/timecode'
import { snap, snapPoints, SNAP_WORDS } from '#shared/utils/ribband/snap'
import { SHORTEST_CHAPTER_MS } from '#shared/utils/chapters/edits'
import type { Player } from '../player/usePlayer'

/** A point that is set by ear or eye is about this far off; the next word, pause or cut within it is what was meant. */
const SNAP_MS = 350

export interface Marks { clipId: string, inMs: number | null, outMs: number | null }
export interface MarkedRange { clipId: string, startMs: number, endMs: number }

/** In and out points, in ms of one clip: a chapter belongs to its footage, not to the session's clock. */
export function useMarks(player: Player, { cues, chapters, say }: { cues: () => CueView[], chapters: () => ChapterView[], say: (words: string) => void }) {
  const marks = shallowRef<Marks | null>(null)

  function set(point: 'in' | 'out', exact: boolean): void {
    const clip = player.active.value
    if (!clip) return
    const points = exact ? [] : snapPoints(clip.clip, cues(), chapters())
    const { ms, point: met } = snap(Math.round(player.clipMs.value), points, SNAP_MS, { min: 0, max: clip.endMs - clip.startMs })
    const old = marks.value?.clipId === clip.id ? marks.value : { clipId: clip.id, inMs: null, outMs: null }
    const next = point === 'in' ? { ...old, inMs: ms } : { ...old, outMs: ms }
    // Points in the wrong order: the one just set is meant.
    if (next.inMs !== null && next.outMs !== null && next.outMs - next.inMs < SHORTEST_CHAPTER_MS) {
      if (point === 'in') next.outMs = null
      else next.inMs = null
    }
    marks.value = next
    say(`${point === 'in' ? 'In' : 'Out'} point set at ${formatClock(clip.startMs + ms, { tenths: true })}${met ? `, ${SNAP_WORDS[met.kind]}` : ''}`)
  }

  function setRange(range: MarkedRange): void {
    marks.value = { clipId: range.clipId, inMs: range.startMs, outMs: range.endMs }
  }
  function clear(): void {
    if (marks.value) say('In and out points cleared')
    marks.value = null
  }

  /** What would be tagged: in to out, or in to the playhead while there is no out. */
  const range = computed<MarkedRange | null>(() => {
    const now = marks.value
    if (!now || now.inMs === null) return null
    const endMs = now.outMs ?? (player.clipId.value === now.clipId ? Math.round(player.clipMs.value) : null)
    return endMs !== null && endMs - now.inMs >= SHORTEST_CHAPTER_MS ? { clipId: now.clipId, startMs: now.inMs, endMs } : null
  })
  /** The same on the session's clock, for the ribband. */
  const selection = computed(() => {
    const offset = player.placed.value.find(clip => clip.id === range.value?.clipId)?.startMs
    return range.value && offset !== undefined ? { inMs: offset + range.value.startMs, outMs: offset + range.value.endMs } : null
  })
  const offset = computed(() => player.placed.value.find(clip => clip.id === marks.value?.clipId)?.startMs ?? 0)
  const inAt = computed(() => marks.value?.inMs == null ? null : offset.value + marks.value.inMs)
  const outAt = computed(() => marks.value?.outMs == null ? null : offset.value + marks.value.outMs)

  function goTo(point: 'in' | 'out'): void {
    const ms = point === 'in' ? marks.value?.inMs : marks.value?.outMs
    if (marks.value && ms != null) player.seekClip(marks.value.clipId, ms)
  }

  return { marks, range, selection, inAt, outAt, set, setRange, clear, goTo }
}

export type SessionMarks = ReturnType<typeof useMarks>
