import type { TranscriptRow } from './rows'

/** A point between two letters of a row's text. */
export interface TextPoint { index: number, offset: number }

/** A stretch of one clip that words were said in, in ms of the clip. */
export interface SpokenRange { clipId: string, startMs: number, endMs: number, /** The selection went on into another clip. */ cut: boolean }

/**
 * The time that selected words take. A caption says when it begins and ends, not when each word does: words within
 * it are placed by their share of its letters, and a caption selected from its first letter begins exactly.
 * A chapter belongs to one clip, so a selection that runs on into the next is cut at the clip's last caption.
 */
export function spokenRange(rows: readonly TranscriptRow[], one: TextPoint, other: TextPoint): SpokenRange | null {
  const [from, to] = one.index < other.index || (one.index === other.index && one.offset <= other.offset) ? [one, other] : [other, one]
  const first = rows[from.index]
  if (!first || !rows[to.index]) return null
  let last = to.index
  while (last > from.index && rows[last]!.cue.clipId !== first.cue.clipId) last--
  const cut = last !== to.index
  const startMs = timeOf(first, from.offset)
  const endMs = cut ? rows[last]!.cue.endMs : timeOf(rows[last]!, to.offset)
  return endMs > startMs ? { clipId: first.cue.clipId, startMs, endMs, cut } : null
}

function timeOf({ cue }: TranscriptRow, offset: number): number {
  const share = cue.text.length ? Math.min(1, Math.max(0, offset / cue.text.length)) : 0
  return Math.round(cue.startMs + (cue.endMs - cue.startMs) * share)
}
