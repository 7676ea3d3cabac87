import type { ChapterView, CueView, TrackView } from '#shared/types/session'
import type { PlacedClip } from '../ribband/clock'

export interface TranscriptRow {
  cue: CueView
  /** Place among all rows. */
  index: number
  /** On the session's clock. */
  startMs: number
  endMs: number
  /** The chapter that the middle of the caption lies in. */
  chapter: ChapterView | null
  /** First caption of its chapter, or of its clip. */
  opensChapter: boolean
  opensClip: boolean
}

/** Captions as they are read: clip after clip in the order of the session's clock, each by time. */
export function layTranscript(clips: readonly PlacedClip[], cues: readonly CueView[], chapters: readonly ChapterView[]): TranscriptRow[] {
  const cuesOf = groupBy(cues)
  const chaptersOf = groupBy(chapters)
  const rows: TranscriptRow[] = []
  for (const clip of clips) {
    const own = (chaptersOf.get(clip.id) ?? []).sort((a, b) => a.startMs - b.startMs)
    let at = 0
    let last: string | null = null
    const inOrder = (cuesOf.get(clip.id) ?? []).sort((a, b) => a.startMs - b.startMs || a.endMs - b.endMs)
    inOrder.forEach((cue, n) => {
      const middle = (cue.startMs + cue.endMs) / 2
      while (at < own.length && own[at]!.endMs <= middle) at++
      // Captions overlap now and then, so that a later one may have an earlier middle.
      while (at > 0 && own[at - 1]!.endMs > middle) at--
      const chapter = own[at] && own[at]!.startMs <= middle ? own[at]! : null
      rows.push({ cue, index: rows.length, startMs: clip.startMs + cue.startMs, endMs: clip.startMs + cue.endMs, chapter, opensChapter: chapter !== null && chapter.id !== last, opensClip: n === 0 })
      last = chapter?.id ?? null
    })
  }
  return rows
}

/** The row being said at a time of a clip, else the last one said; −1 before the first. */
export function rowAt(rows: readonly TranscriptRow[], clipId: string | null, clipMs: number): number {
  const from = rows.findIndex(row => row.cue.clipId === clipId)
  if (from < 0) return -1
  let low = from
  let high = rows.length
  while (low < high) {
    const middle = (low + high) >> 1
    const row = rows[middle]!
    if (row.cue.clipId === clipId && row.cue.startMs <= clipMs) low = middle + 1
    else high = middle
  }
  return low - 1 >= from ? low - 1 : -1
}

/** Rows whose words hold all of `wanted`, whatever the case. */
export function findRows(rows: readonly TranscriptRow[], wanted: string): number[] {
  const words = wanted.trim().toLocaleLowerCase('en')
  if (!words) return []
  return rows.filter(row => row.cue.text.toLocaleLowerCase('en').replace(/\s+/g, ' ').includes(words)).map(row => row.index)
}

/**
 * Which of `count` places found comes next (1) or before (-1), round and round; null when there are none. On from a
 * place that was only shown and not yet gone to is that place itself.
 */
export function nextFound(count: number, at: number, by: 1 | -1, wentThere: boolean): number | null {
  if (count === 0) return null
  return by === 1 && !wentThere ? Math.max(0, at) : (at + by + count) % count
}

/** Languages that captions are there in, most captions first; 'und' for unnamed. */
export function languagesOf(tracks: readonly TrackView[]): string[] {
  const counts = new Map<string, number>()
  for (const track of tracks) if (track.clipId && track.cueCount) counts.set(track.language, (counts.get(track.language) ?? 0) + track.cueCount)
  return [...counts].sort((a, b) => b[1] - a[1]).map(([language]) => language)
}

/** Captions of one language where a clip has it, else of whatever it has: each said word once. */
export function cuesIn(language: string | null, cues: readonly CueView[], tracks: readonly TrackView[]): CueView[] {
  const chosen = new Map<string, Set<string>>()
  for (const clipId of new Set(tracks.flatMap(track => track.clipId ?? []))) {
    const own = tracks.filter(track => track.clipId === clipId && track.cueCount > 0)
    const wanted = own.filter(track => track.language === language)
    const best = wanted.length ? wanted : own.filter(track => track.language === own[0]!.language)
    chosen.set(clipId, new Set(best.map(track => track.id)))
  }
  return cues.filter(cue => chosen.get(cue.clipId)?.has(cue.trackId) ?? true)
}

function groupBy<One extends { clipId: string }>(items: readonly One[]): Map<string, One[]> {
  const groups = new Map<string, One[]>()
  for (const item of items) {
    const group = groups.get(item.clipId)
    if (group) group.push(item)
    else groups.set(item.clipId, [item])
  }
  return groups
}
