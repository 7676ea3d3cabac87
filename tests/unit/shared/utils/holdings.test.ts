import { expect, it } from 'vitest'
import { holdingsWords } from '#shared/utils/holdings'

const nothing = { sessions: 0, clips: 0, footageMs: 0, chapters: 0, inked: 0, captions: 0, corrected: 0 }

it.each([
  [{}, ''],
  [{ captions: 1 }, '1 caption'],
  [{ clips: 1, footageMs: 48_000, chapters: 2, inked: 2 }, '1 clip (48 s) and 2 chapters (all inked)'],
  [{ sessions: 12, clips: 31, footageMs: 11_100_000, chapters: 90, inked: 7, captions: 4210, corrected: 3 }, '12 sessions, 31 clips (3 h 05 min), 90 chapters (7 of them inked) and 4,210 captions (3 corrected)'],
])('says what %j is', (held, words) => expect(holdingsWords({ ...nothing, ...held })).toBe(words))
