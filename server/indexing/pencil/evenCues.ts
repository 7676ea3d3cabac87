import type { SpokenCue } from './types'

/** Words in a row of captions as players show them; shorter cues are joined up to about so many. */
const WORDS = 7
/** Below so many words a cue, on average, captions come word by word. */
const SHORT = 4
const PAUSE_MS = 900

const wordsIn = (text: string) => text.split(/\s+/).filter(Boolean).length

/** Above so many words a cue holds several thoughts and is parted. */
const LONG = 16
const TURNS = /^(?:okay|ok|right|so|now|and|but|because|next|then|alright|well)$/i

/**
 * Captions that come a word or two at a time (as speech recognisers write them) are joined to lines, and those of
 * whole paragraphs are parted, so that whoever reads them hears phrases. Joined cues start and end with their words;
 * words of a parted cue are given times by their place in it.
 */
export function evenCues(cues: readonly SpokenCue[]): readonly SpokenCue[] {
  return joinShort(cues).flatMap(partLong)
}

function partLong(cue: SpokenCue): SpokenCue[] {
  if (wordsIn(cue.text) <= LONG) return [cue]
  const text = cue.text.replace(/\s+/g, ' ').trim()
  const words = text.split(' ')
  const pieces: SpokenCue[] = []
  let at = 0
  let from = 0
  const time = (place: number) => Math.round(cue.startMs + (cue.endMs - cue.startMs) * place / text.length)
  let place = 0
  words.forEach((word, i) => {
    place += word.length + 1
    const said = i + 1 - from
    const left = words.length - i - 1
    const next = words[i + 1] ?? ''
    const ends = /[.!?]["'”’]?$/.test(word)
    if (left > 0 && left < 3) return
    if (left === 0 || (ends && said >= 3) || (said >= WORDS && TURNS.test(next.replace(/\W+$/, ''))) || said >= WORDS + 3) {
      pieces.push({ startMs: time(at), endMs: time(Math.min(place, text.length)), text: words.slice(from, i + 1).join(' ') })
      at = place
      from = i + 1
    }
  })
  return pieces
}

function joinShort(cues: readonly SpokenCue[]): readonly SpokenCue[] {
  const spoken = cues.filter(cue => cue.text.trim())
  if (!spoken.length || spoken.reduce((sum, cue) => sum + wordsIn(cue.text), 0) / spoken.length >= SHORT) return cues
  const lines: SpokenCue[] = []
  let words = 0
  for (const cue of spoken) {
    const last = lines.at(-1)
    const sound = /^\s*[[(♪]/
    const apart = !last || words >= WORDS || cue.startMs - last.endMs > PAUSE_MS || /[.!?]["'”’]?\s*$/.test(last.text) || sound.test(cue.text) || sound.test(last.text)
    if (apart) {
      lines.push({ ...cue })
      words = wordsIn(cue.text)
    }
    else {
      last.text = `${last.text.trim()} ${cue.text.trim()}`
      last.endMs = Math.max(last.endMs, cue.endMs)
      words += wordsIn(cue.text)
    }
  }
  return lines
}
