import type { StepView } from '../../types/plan'
import type { ChapterView, ClipView, CueView } from '../../types/session'
import { placeClips, type PlacedClip } from './clock'
import { layLine, toLine, type Line } from './line'
import { plankOf, type Plank } from './planks'
import { lowerBound } from './search'

export interface StripClip extends PlacedClip<ClipView> {
  /** Place of the first frame on the line. */
  lineMs: number
  lineEndMs: number
  /** In order of start. */
  cues: CueView[]
}

export interface CueOnLine { cue: CueView, lane: number, startMs: number, endMs: number }
/** Where two chapters meet, or a chapter meets bare floor. */
export interface Station { lineMs: number, sessionMs: number, lane: number }

/** The footage of a session laid on the line, with its captions. */
export interface Footage {
  line: Line
  clips: StripClip[]
  byId: Map<string, StripClip>
  lanes: { cameras: string[] }[]
  startMs: number
  endMs: number
  cues: CueOnLine[]
  cueStarts: Float64Array
  /** Scene changes of each band, on the line. */
  scenes: Float64Array[]
  /** Places on the line where hours without footage were folded away. */
  folds: { lineMs: number, missingMs: number }[]
}

/** The chapters on it. */
export interface Planking {
  /** Planks of each band, in order. */
  planks: Plank[][]
  stations: Station[]
  /** Places of each band's stations on the line, in order. */
  stationPlaces: Float64Array[]
}

/** Everything the ribband shows, laid on the line once, so that drawing only looks things up. */
export interface Strip extends Footage, Planking {}

export function layFootage(clipViews: readonly ClipView[], cueViews: readonly CueView[]): Footage {
  const placement = placeClips(clipViews)
  const line = layLine(placement.clips)
  const cuesOf = groupBy(cueViews, cue => cue.clipId)
  const clips = placement.clips.map((placed): StripClip => {
    const lineMs = toLine(line, placed.startMs)
    return { ...placed, lineMs, lineEndMs: lineMs + placed.endMs - placed.startMs, cues: (cuesOf.get(placed.id) ?? []).sort((a, b) => a.startMs - b.startMs) }
  })
  const cues = clips
    .flatMap(clip => clip.cues.map((cue): CueOnLine => ({ cue, lane: clip.lane, startMs: clip.lineMs + cue.startMs, endMs: clip.lineMs + cue.endMs })))
    .sort((a, b) => a.startMs - b.startMs)
  return {
    line, clips, cues,
    byId: new Map(clips.map(clip => [clip.id, clip])),
    lanes: placement.lanes, startMs: placement.startMs, endMs: placement.endMs,
    cueStarts: Float64Array.from(cues, cue => cue.startMs),
    scenes: placement.lanes.map((_, lane) => Float64Array.from(
      clips.filter(clip => clip.lane === lane).flatMap(clip => clip.clip.sceneChangesMs.map(ms => clip.lineMs + ms)),
    ).sort()),
    folds: line.stretches.slice(1).map((stretch, index) => ({ lineMs: stretch.lineMs, missingMs: stretch.startMs - line.stretches[index]!.endMs })),
  }
}

export function layChapters(footage: Footage, chapters: readonly ChapterView[], steps: readonly StepView[]): Planking {
  const stepOf = new Map(steps.map(step => [step.id, step]))
  const planks: Plank[][] = footage.lanes.map(() => [])
  for (const chapter of chapters) {
    const clip = footage.byId.get(chapter.clipId)
    if (clip) planks[clip.lane]!.push(plankOf(chapter, chapter.stepId === null ? undefined : stepOf.get(chapter.stepId), { lane: clip.lane, clipLineMs: clip.lineMs }))
  }
  for (const band of planks) band.sort((a, b) => a.startMs - b.startMs)
  const stations = stationsOf(planks, footage.byId)
  return { planks, stations, stationPlaces: planks.map((_, lane) => Float64Array.from(stations.filter(station => station.lane === lane), station => station.lineMs)) }
}

function stationsOf(planks: Plank[][], byId: Map<string, StripClip>): Station[] {
  const stations = planks.flatMap((band, lane) => band.flatMap((plank, index): Station[] => {
    const offset = byId.get(plank.chapter.clipId)!.startMs
    const start = { lineMs: plank.startMs, sessionMs: offset + plank.chapter.startMs, lane }
    const meetsNext = band[index + 1]?.startMs === plank.endMs
    return meetsNext ? [start] : [start, { lineMs: plank.endMs, sessionMs: offset + plank.chapter.endMs, lane }]
  }))
  return stations.sort((a, b) => a.lineMs - b.lineMs)
}

function groupBy<T>(items: readonly T[], keyOf: (item: T) => string): Map<string, T[]> {
  const groups = new Map<string, T[]>()
  for (const item of items) {
    const group = groups.get(keyOf(item))
    if (group) group.push(item)
    else groups.set(keyOf(item), [item])
  }
  return groups
}

/** The words being said at a time of a clip; the latest to begin when captions overlap. */
export function cueAt(clip: StripClip, clipMs: number): CueView | null {
  for (let index = lowerBound(clip.cues.length, i => clip.cues[i]!.startMs, clipMs + 1e-6) - 1, seen = 0; index >= 0 && seen < 8; index--, seen++) {
    if (clip.cues[index]!.endMs > clipMs) return clip.cues[index]!
  }
  return null
}

/** The chapter that covers a place of a band; null on bare floor. */
export function plankAt(planks: readonly Plank[], lineMs: number): Plank | null {
  const plank = planks[lowerBound(planks.length, index => planks[index]!.startMs, lineMs + 1e-6) - 1]
  return plank && lineMs < plank.endMs ? plank : null
}
