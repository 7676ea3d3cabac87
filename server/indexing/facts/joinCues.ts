import type { SpokenClip } from '../pencil/types'

/** What is said over a clip as one text, and the time of the cue in which a place of it stands (UTF-16 offset → ms). */
export interface JoinedCues { text: string, startMsAt: (offset: number) => number }

/** Joins cues with one space, without markup: what is measured may run over the end of a cue. */
export function joinCues(clip: SpokenClip): JoinedCues {
  let text = ''
  const starts: { offset: number, startMs: number }[] = []
  for (const cue of clip.cues) {
    const plain = cue.text.replace(/<[^>]*>/g, '').replace(/\s+/g, ' ').trim()
    if (!plain) continue
    if (text) text += ' '
    starts.push({ offset: text.length, startMs: cue.startMs })
    text += plain
  }
  const startMsAt = (offset: number) => {
    let low = 0
    let high = starts.length - 1
    while (low < high) {
      const middle = (low + high + 1) >> 1
      if (starts[middle]!.offset <= offset) low = middle
      else high = middle - 1
    }
    return starts[low]?.startMs ?? 0
  }
  return { text, startMsAt }
}
