import type { Cue } from '#shared/types/captions'
import type { ChapterMark, Line, SecondCameraClip, SpokenClip, ToolSound } from './types'

/** A chapter with its place in the clip, integer milliseconds. */
export interface TimedChapter extends ChapterMark { startMs: number, endMs: number }
export interface TimedShot { startMs: number, endMs: number, shot: string }
export interface TimedSound { startMs: number, endMs: number, sound: ToolSound, under: boolean }
export interface TimedLine { startMs: number, endMs: number, line: Line }

/** Where everything of a clip falls once each sentence's spoken length is known. */
export interface Timeline {
  durationMs: number
  lines: TimedLine[]
  cues: Cue[]
  chapters: TimedChapter[]
  shots: TimedShot[]
  sounds: TimedSound[]
}

const LEAD_IN_MS = 700
const BREATH_MS = 420
const BEAT_GAP_MS = 900
/** The picture changes so long before the first word over it. */
const SHOT_LEAD_MS = 200
const CUE_CHARACTERS = 76

/**
 * Lays a spoken clip out in time.
 * `spokenMs` holds the measured length of each sentence in order, beats joined.
 * Chapters meet in the pause between two beats, so no word is cut, and where the next beat's picture begins.
 */
export function layOut(clip: SpokenClip, spokenMs: number[]): Timeline {
  const timeline: Timeline = { durationMs: 0, lines: [], cues: [], chapters: [], shots: [], sounds: [] }
  let now = LEAD_IN_MS
  let spoken = 0
  let beatStart = 0
  for (const [index, beat] of clip.beats.entries()) {
    for (const line of beat.lines) {
      const length = spokenMs[spoken++]
      if (length === undefined) throw new Error(`${clip.file}: no spoken length for “${line.text}”.`)
      const end = now + length
      const pause = line.pauseMs ?? 0
      timeline.lines.push({ startMs: now, endMs: end, line })
      timeline.cues.push(...cuesOf(line.text, now, end))
      if (line.shot) startShot(timeline.shots, line.shot, timeline.shots.length ? now - SHOT_LEAD_MS : 0)
      if (line.sound) {
        timeline.sounds.push(pause > 500
          ? { startMs: end + 250, endMs: end + pause, sound: line.sound, under: false }
          : { startMs: now, endMs: end, sound: line.sound, under: true })
      }
      now = end + pause + BREATH_MS
    }
    const last = index === clip.beats.length - 1
    const beatEnd = last ? now : now + BEAT_GAP_MS - SHOT_LEAD_MS
    if (beat.chapter) timeline.chapters.push({ ...beat.chapter, startMs: beatStart, endMs: beatEnd })
    beatStart = beatEnd
    if (!last) now += BEAT_GAP_MS
  }
  timeline.durationMs = now
  const shot = timeline.shots.at(-1)
  if (shot) shot.endMs = now
  timeline.cues.forEach((cue, index) => cue.id = String(index + 1))
  return timeline
}

/** What a second camera, started `fromMs` into another clip, has of that clip's words and chapters. */
export function overhear(clip: SecondCameraClip, heard: Timeline): Timeline {
  const until = clip.fromMs + clip.lengthMs
  const cut = <T extends { startMs: number, endMs: number }>(spans: T[], least: number): T[] => spans
    .map(span => ({ ...span, startMs: Math.max(span.startMs, clip.fromMs) - clip.fromMs, endMs: Math.min(span.endMs, until) - clip.fromMs }))
    .filter(span => span.endMs - span.startMs >= least)
  const whole = heard.cues.filter(cue => cue.startMs >= clip.fromMs && cue.endMs <= until)
  const shots: TimedShot[] = []
  for (const { atMs, shot } of clip.shots) startShot(shots, shot, atMs)
  shots.at(-1)!.endMs = clip.lengthMs
  return {
    durationMs: clip.lengthMs,
    lines: [],
    cues: cut(whole, 1).map((cue, index) => ({ ...cue, id: String(index + 1) })),
    chapters: cut(heard.chapters, 3000),
    shots,
    sounds: [],
  }
}

function startShot(shots: TimedShot[], shot: string, atMs: number): void {
  const before = shots.at(-1)
  if (before) before.endMs = atMs
  shots.push({ startMs: atMs, endMs: atMs, shot })
}

/** One caption for a short sentence, two for a long one, broken at a comma or a space near the middle. */
function cuesOf(text: string, startMs: number, endMs: number): Cue[] {
  if (text.length <= CUE_CHARACTERS) return [{ id: '', startMs, endMs, text: wrapped(text) }]
  const at = breakNearMiddle(text)
  const middle = Math.round(startMs + (endMs - startMs) * at / text.length)
  return [
    { id: '', startMs, endMs: middle, text: wrapped(text.slice(0, at).trim()) },
    { id: '', startMs: middle, endMs, text: wrapped(text.slice(at).trim()) },
  ]
}

function wrapped(text: string): string {
  if (text.length <= 42) return text
  const at = breakNearMiddle(text)
  return `${text.slice(0, at).trim()}\n${text.slice(at).trim()}`
}

function breakNearMiddle(text: string): number {
  let best = 0
  let cost = Infinity
  for (let i = 1; i < text.length; i++) {
    if (text[i] !== ' ') continue
    const c = Math.abs(i - text.length / 2) - (/[,:.]/.test(text[i - 1]!) ? text.length / 5 : 0)
    if (c < cost) [best, cost] = [i, c]
  }
  return best
}
