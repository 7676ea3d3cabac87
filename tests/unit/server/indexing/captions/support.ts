import { readCaptions } from '#server/indexing/captions/readCaptions'
import type { CaptionReading, Cue } from '#shared/types/captions'

export const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text)

export const read = (text: string, name = 'session.vtt'): CaptionReading => readCaptions(bytesOf(text), { name })

/** Cues as `[id, start, end, text]`, easier to compare at a glance. */
export const rows = (cues: readonly Cue[]): [string, number, number, string][] =>
  cues.map(cue => [cue.id, cue.startMs, cue.endMs, cue.text])
