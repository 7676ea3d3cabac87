import { clamp } from './search'

/** What placing needs to know of a clip; `ClipView` fits. */
export interface ClipOnClock { id: string, durationMs: number | null, offsetMs: number, camera: string }

/** A clip with a known length on the session's clock: [startMs, endMs). */
export interface PlacedClip<C extends ClipOnClock = ClipOnClock> {
  clip: C
  id: string
  /** Band it is drawn in, from 0. */
  lane: number
  offsetMs: number
  startMs: number
  endMs: number
}

export interface Placement<C extends ClipOnClock = ClipOnClock> {
  /** In order of their start, then lane. */
  clips: PlacedClip<C>[]
  /** One entry a band, with the cameras whose clips lie in it. */
  lanes: { cameras: string[] }[]
  /** From the first frame to the last on the session's clock; both 0 without footage. */
  startMs: number
  endMs: number
}

/**
 * Cameras write their start in whole seconds, so that two clips of one run can seem to overlap by less
 * than one; that alone opens no further band.
 */
export const SAME_LANE_OVERLAP_MS = 1000

/**
 * Lays clips in bands: all of one camera in one band, cameras that never overlap share it. Clips of one
 * camera that do overlap (a clock set wrong) spill into further bands. Clips whose length is not known
 * yet are left out.
 */
export function placeClips<C extends ClipOnClock>(clips: readonly C[]): Placement<C> {
  const known = clips
    .filter(clip => clip.durationMs !== null && clip.durationMs > 0)
    .map((clip): PlacedClip<C> => ({
      clip, id: clip.id, lane: 0, offsetMs: clip.offsetMs, startMs: clip.offsetMs, endMs: clip.offsetMs + clip.durationMs!,
    }))
    .sort((a, b) => a.startMs - b.startMs || a.endMs - b.endMs || (a.id < b.id ? -1 : 1))

  const lanes: { cameras: string[], clips: PlacedClip<C>[] }[] = []
  for (const group of runsByCamera(known)) {
    let lane = lanes.findIndex(candidate => group.every(clip => fits(clip, candidate.clips)))
    if (lane < 0) lane = lanes.push({ cameras: [], clips: [] }) - 1
    const camera = group[0]!.clip.camera
    if (!lanes[lane]!.cameras.includes(camera)) lanes[lane]!.cameras.push(camera)
    for (const clip of group) {
      clip.lane = lane
      lanes[lane]!.clips.push(clip)
    }
  }
  return {
    clips: known.sort((a, b) => a.startMs - b.startMs || a.lane - b.lane),
    lanes: lanes.map(({ cameras }) => ({ cameras })),
    startMs: known[0]?.startMs ?? 0,
    endMs: known.reduce((end, clip) => Math.max(end, clip.endMs), known[0]?.endMs ?? 0),
  }
}

/** Clips of each camera, cameras in order of their first clip, without overlaps inside a run. */
function runsByCamera<C extends ClipOnClock>(clips: PlacedClip<C>[]): PlacedClip<C>[][] {
  const cameras = new Map<string, PlacedClip<C>[][]>()
  for (const clip of clips) {
    const runs = cameras.get(clip.clip.camera) ?? []
    const run = runs.find(candidate => fits(clip, candidate))
    if (run) run.push(clip)
    else runs.push([clip])
    cameras.set(clip.clip.camera, runs)
  }
  return [...cameras.values()].flat()
}

function fits(clip: PlacedClip, others: PlacedClip[]): boolean {
  return others.every((other) => {
    const overlap = Math.min(clip.endMs, other.endMs) - Math.max(clip.startMs, other.startMs)
    return overlap <= 0 || (overlap < SAME_LANE_OVERLAP_MS && clip.clip.camera === other.clip.camera
      && overlap < Math.min(clip.endMs - clip.startMs, other.endMs - other.startMs))
  })
}

/** A clip's millisecond on the session's clock. */
export function toSession(clip: { offsetMs: number }, clipMs: number): number {
  return clip.offsetMs + clipMs
}

/** The session's millisecond in a clip, held within the clip. */
export function toClip(clip: { startMs: number, endMs: number }, sessionMs: number): number {
  return clamp(sessionMs - clip.startMs, 0, clip.endMs - clip.startMs)
}

/** The clip that shows a time of the session, from the preferred band when it has one then; null in a gap. */
export function clipAt<P extends PlacedClip>(clips: readonly P[], sessionMs: number, preferredLane = 0): P | null {
  let best: P | null = null
  for (const clip of clips) {
    if (clip.startMs > sessionMs) break
    if (sessionMs >= clip.endMs) continue
    // Of two clips in one band the later has the better claim: the earlier's end is the uncertain part.
    if (clip.lane === preferredLane) best = clip
    else if (best === null || (best.lane !== preferredLane && clip.lane <= best.lane)) best = clip
  }
  return best
}

/** The clip to go to from any time: the one that shows it, else the nearest edge. Null without footage. */
export function nearestClip<P extends PlacedClip>(clips: readonly P[], sessionMs: number, preferredLane = 0): P | null {
  const there = clipAt(clips, sessionMs, preferredLane)
  if (there) return there
  const away = (clip: P) => sessionMs < clip.startMs ? clip.startMs - sessionMs : sessionMs - clip.endMs
  return clips.reduce<P | null>((best, clip) => best === null || away(clip) < away(best) ? clip : best, null)
}
