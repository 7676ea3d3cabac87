/** What a caption file's name says about it. */
export interface CaptionPairing {
  captionName: string
  /** The clip it belongs to, as named in the list of clips; null when no name fits, or two do equally well. */
  clipName: string | null
  /** BCP 47 language tag as written in the name, tidied ('en-GB'); null when the name has none. */
  language: string | null
}

const CAPTION_ENDING = /\.(?:vtt|srt|webvtt|txt)$/i
/** A language, with script or region, and the words that programs put beside it. */
const LANGUAGE = /^[a-z]{2,3}(?:[-_][a-z]{4})?(?:[-_](?:[a-z]{2}|\d{3}))?$/i
const NOTES = new Set(['sdh', 'cc', 'forced', 'auto', 'default'])

/**
 * Pairs caption files with clips by name: `clip.mp4` with `clip.vtt`, `clip.en.vtt`, `clip.en-GB.srt`
 * and `clip.mp4.vtt`; capitals do not matter. When several clips fit, the longest name wins. A pure
 * function of the names; each caption file is answered in the order given.
 */
export function pairCaptions(clipNames: readonly string[], captionNames: readonly string[]): CaptionPairing[] {
  const byStem = new Map<string, string[]>()
  const file = (key: string, clip: string) => byStem.set(key, [...(byStem.get(key) ?? []), clip])
  for (const clip of new Set(clipNames)) {
    const whole = fold(clip)
    const stem = fold(clip.replace(/\.[^.]*$/, ''))
    file(whole, clip)
    if (stem !== whole) file(stem, clip)
  }
  return captionNames.map(name => pairOne(name, byStem))
}

function pairOne(captionName: string, byStem: Map<string, string[]>): CaptionPairing {
  let stem = captionName.replace(CAPTION_ENDING, '')
  let language: string | null = null
  // From the longest stem to shorter ones, taking off only what may stand between a clip's name and the ending.
  for (let taken = 0; taken < 4; taken++) {
    const clips = byStem.get(fold(stem))
    if (clips) return { captionName, clipName: clips.length === 1 ? clips[0]! : null, language }
    const dot = stem.lastIndexOf('.')
    const last = stem.slice(dot + 1)
    if (dot <= 0) break
    if (!NOTES.has(last.toLowerCase())) {
      if (language !== null || !LANGUAGE.test(last)) break
      language = tidyLanguage(last)
    }
    stem = stem.slice(0, dot)
  }
  return { captionName, clipName: null, language }
}

function tidyLanguage(tag: string): string | null {
  try {
    return Intl.getCanonicalLocales(tag.replaceAll('_', '-'))[0] ?? null
  }
  catch {
    return null
  }
}

function fold(name: string): string {
  return name.normalize('NFC').toLowerCase()
}
