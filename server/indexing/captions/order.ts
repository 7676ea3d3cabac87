import type { Cue } from '#shared/types/captions'
import { formatClock } from '#shared/utils/timecode'
import type { WarningList } from './warnings'

/** The database keeps milliseconds in four bytes; more than 24 days is a mistake in any clip. */
const LAST_STORED_MS = 2_147_483_647

/**
 * Cues in the order in which a player goes through them, HTML's "text track cue order": by start, of
 * equal starts the longer first, otherwise as in the file. Returns a new array.
 */
export function orderCues(cues: readonly Cue[]): Cue[] {
  return [...cues].sort((a, b) => a.startMs - b.startMs || b.endMs - a.endMs)
}

/** Ordered cues whose end is never before their start (such a cue is never on screen) and that the database can hold. */
export function cuesForStorage(cues: readonly Cue[]): Cue[] {
  return orderCues(cues).map((cue) => {
    const startMs = Math.min(cue.startMs, LAST_STORED_MS)
    return { ...cue, startMs, endMs: Math.min(Math.max(cue.endMs, startMs), LAST_STORED_MS) }
  })
}

/** Says where cues are out of order, last no time or overlap. Cues are taken in file order. */
export function warnAboutTimes(cues: readonly Cue[], warnings: WarningList): void {
  let latestStart = 0
  for (const cue of cues) {
    if (cue.startMs < latestStart) warnings.add(() => `${nameOf(cue)} comes after a later one in the file. It was put in order by its time.`)
    if (cue.endMs < cue.startMs) warnings.add(() => `${nameOf(cue)} ends before it starts, so no player shows it. It was kept.`)
    if (cue.endMs === cue.startMs) warnings.add(() => `${nameOf(cue)} lasts no time, so no player shows it. It was kept.`)
    latestStart = Math.max(latestStart, cue.startMs)
  }
  let showing: Cue | undefined
  for (const cue of orderCues(cues)) {
    if (cue.endMs <= cue.startMs) continue
    const before = showing
    if (before && cue.startMs < before.endMs) warnings.add(() => `${nameOf(cue)} starts before the one at ${clock(before)} has ended. Both were kept.`)
    if (!before || cue.endMs > before.endMs) showing = cue
  }
}

const clock = (cue: Cue): string => formatClock(cue.startMs, { tenths: true })
const nameOf = (cue: Cue): string => `The caption at ${clock(cue)}`

/** Captions may run over the end by this much: the last words are often held until after the picture. */
const TAIL_MS = 2000

/**
 * Compares captions with the clip that they are to belong to: why they may belong to another one, in words for
 * people, or null when nothing speaks against it. Captions that end early say nothing: who films is often silent.
 * @param durationMs length of the clip in milliseconds
 */
export function checkAgainstClip(cues: readonly Cue[], durationMs: number): string | null {
  const last = cues.reduce((end, cue) => Math.max(end, cue.endMs, cue.startMs), 0)
  const over = last - durationMs
  if (over <= TAIL_MS) return null
  const outside = cues.filter(cue => cue.startMs >= durationMs).length
  const unseen = outside ? ` ${outside === 1 ? '1 caption starts' : `${outside} captions start`} after its end and will not be seen.` : ''
  return `The captions run ${spokenLength(over)} longer than the clip.${unseen}`
}

/** '3 min 10 s', '45 s', '1 h 2 min': whole seconds, at most two units, rounded to the nearest. */
function spokenLength(ms: number): string {
  const seconds = Math.max(1, Math.round(ms / 1000))
  const units: [number, string][] = [[Math.floor(seconds / 3600), 'h'], [Math.floor(seconds / 60) % 60, 'min'], [seconds % 60, 's']]
  return units.filter(([n]) => n > 0).slice(0, 2).map(([n, unit]) => `${n} ${unit}`).join(' ')
}
