import type { RecordedAtSource } from '#shared/types/trade'
import { compareFileNames, recordedAtFromName } from '#shared/utils/clipNames'

/** What is known of a clip's time. Instants are ISO 8601 strings. */
export interface ClipToAlign {
  id: string
  name: string
  /** Integer ms; null until probed. */
  durationMs: number | null
  /** Creation time in the container, with its zone. */
  containerAt: string | null
  /** Set by a person: beats everything else. */
  handAt: string | null
  /** Present place on the session's clock, integer ms; it counts where `placedBy` is set or it was given by hand. */
  offsetMs: number
  offsetByHand: boolean
  /** What its present place was worked out from; null before the first time. */
  placedBy: RecordedAtSource | null
}

export interface AlignedClip { id: string, recordedAt: Date | null, recordedAtSource: RecordedAtSource, offsetMs: number }

const DAY_MS = 86_400_000
const QUARTER_MS = 900_000

/**
 * Lays a session's clips on one clock, in integer ms; the earliest begins at 0.
 *
 * A clip's time is, in this order: set by hand, the container's creation time, a time in the file name,
 * or, with none of these, right after the clip before it by file name. Some phones write the time at
 * which recording ended, or local time marked as UTC; nothing in the file tells, so the container's
 * time counts as the start and a person nudges what is wrong.
 *
 * - File names carry local time. Where clips have both, their usual difference (to the quarter hour)
 *   gives the zone for those that have only a name; otherwise names count as UTC.
 * - A clip more than a day away from the middle one has a camera whose clock is wrong: it is placed by
 *   file name instead, so that the session does not become years long.
 * - Clips placed by hand stay where they are against the others: when an earlier clip arrives, all move
 *   together so that the first begins at 0.
 */
export function alignClips(clips: readonly ClipToAlign[]): AlignedClip[] {
  const times = believable(readTimes(clips))
  const zero = clockZero(clips, times)
  const offsets = new Map<string, number>()
  for (const clip of clips) {
    const time = times.get(clip.id)
    if (clip.offsetByHand) offsets.set(clip.id, clip.offsetMs)
    else if (time) offsets.set(clip.id, time.at - zero)
  }
  placeByName(clips, offsets)
  const first = Math.min(...offsets.values())
  return clips.map((clip) => {
    const time = times.get(clip.id)
    return { id: clip.id, recordedAt: time ? new Date(time.at) : null, recordedAtSource: time?.source ?? 'order', offsetMs: offsets.get(clip.id)! - first }
  })
}

interface ClipTime { at: number, source: RecordedAtSource }

function readTimes(clips: readonly ClipToAlign[]): Map<string, ClipTime> {
  const zone = zoneOf(clips)
  const times = new Map<string, ClipTime>()
  for (const clip of clips) {
    const hand = instant(clip.handAt)
    const container = instant(clip.containerAt)
    const local = localTime(clip.name)
    if (hand !== null) times.set(clip.id, { at: hand, source: 'hand' })
    else if (container !== null) times.set(clip.id, { at: container, source: 'container' })
    else if (local !== null) times.set(clip.id, { at: local - zone, source: 'name' })
  }
  return times
}

/** Local time minus UTC, ms, from clips that have both; 0 when none has. */
function zoneOf(clips: readonly ClipToAlign[]): number {
  const differences = clips.flatMap((clip) => {
    const container = instant(clip.containerAt)
    const local = localTime(clip.name)
    if (container === null || local === null) return []
    // Names carry the start; a container's time written at the end would be later, never by a quarter of an hour's rounding.
    return Math.round((local - container) / QUARTER_MS) * QUARTER_MS
  }).filter(difference => Math.abs(difference) <= 14 * 4 * QUARTER_MS)
  return median(differences) ?? 0
}

function believable(times: Map<string, ClipTime>): Map<string, ClipTime> {
  const middle = median([...times.values()].map(time => time.at))
  return new Map([...times].filter(([, time]) => time.source === 'hand' || Math.abs(time.at - middle!) <= DAY_MS))
}

/** The instant at which the session's clock shows 0, from clips that lie on it already. */
function clockZero(clips: readonly ClipToAlign[], times: Map<string, ClipTime>): number {
  const timed = clips.flatMap(clip => times.has(clip.id) ? [{ clip, at: times.get(clip.id)!.at }] : []).sort((a, b) => a.at - b.at)
  // A place worked out from another source says nothing about the time that is believed now.
  const settled = timed.filter(({ clip }) => clip.placedBy === times.get(clip.id)!.source)
  const anchor = settled.find(({ clip }) => !clip.offsetByHand && clip.placedBy !== 'hand')
    ?? settled.find(({ clip }) => !clip.offsetByHand)
    ?? timed.find(({ clip }) => clip.offsetByHand)
  return anchor ? anchor.at - anchor.clip.offsetMs : timed[0]?.at ?? 0
}

/** Gives every clip without a time the end of the clip before it by name, or the place before the one after it. */
function placeByName(clips: readonly ClipToAlign[], offsets: Map<string, number>): void {
  const inOrder = [...clips].sort((a, b) => compareFileNames(a.name, b.name) || (a.id < b.id ? -1 : 1))
  let end: number | null = null
  for (const [i, clip] of inOrder.entries()) {
    if (!offsets.has(clip.id)) offsets.set(clip.id, end ?? startBefore(inOrder, i, offsets))
    end = offsets.get(clip.id)! + (clip.durationMs ?? 0)
  }
}

function startBefore(inOrder: ClipToAlign[], from: number, offsets: Map<string, number>): number {
  const next = inOrder.findIndex((clip, i) => i > from && offsets.has(clip.id))
  if (next < 0) return 0
  const lengths = inOrder.slice(from, next).reduce((sum, clip) => sum + (clip.durationMs ?? 0), 0)
  return offsets.get(inOrder[next]!.id)! - lengths
}

function instant(iso: string | null): number | null {
  const at = iso === null ? Number.NaN : Date.parse(iso)
  return Number.isFinite(at) ? at : null
}

function localTime(name: string): number | null {
  const local = recordedAtFromName(name)
  return local === null ? null : instant(`${local}Z`)
}

function median(values: number[]): number | undefined {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.floor((sorted.length - 1) / 2)]
}
