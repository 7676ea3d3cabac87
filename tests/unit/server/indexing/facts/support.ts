import { hearFacts } from '#server/indexing/facts/hearFacts'
import type { Speaker } from '#server/indexing/facts/speaker'
import type { SpokenClip } from '#server/indexing/pencil/types'

export const INCHES: Speaker = { inches: true, fahrenheit: true }
export const METRIC: Speaker = { inches: false, fahrenheit: false }

/** Cues of four seconds, one after another. */
export const spoken = (...texts: string[]): SpokenClip => ({ cues: texts.map((text, i) => ({ startMs: i * 4000, endMs: i * 4000 + 4000, text })) })

/** What is heard in one cue, as "kind value unit". */
export const heard = (text: string, speaker: Speaker = INCHES): string[] => hearFacts(spoken(text), { speaker }).map(({ kind, value, unit }) => `${kind} ${value} ${unit}`)
