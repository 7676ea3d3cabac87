import type { Inking, Operation } from '#shared/types/trade'

/** What the tools of the shop sound like under, or instead of, the voice. */
export type ToolSound = 'saw' | 'plane' | 'brush' | 'stir' | 'drill' | 'hammer' | 'pencil' | 'knock' | 'kettle'

export type Speaker = 'maud' | 'ivo'

/** One spoken sentence, which becomes one caption or, when it is long, two. */
export interface Line {
  /** As the caption shows it; figures and fractions are spoken as words. */
  text: string
  speaker?: Speaker
  /** Drawn from the start of this line until another line names a shot. */
  shot?: string
  /** Silence, or work without words, after the sentence. */
  pauseMs?: number
  /** Heard in the pause after the sentence; with no pause, quietly under it. */
  sound?: ToolSound
}

/** What a stretch of footage shows, in the words of the plan. */
export interface ChapterMark {
  step: number | null
  operation: Operation
  parts: string[]
  /** What is pencilled here is left to the program: it is not laid down with the build. */
  state: Inking
  note?: string
}

/** A run of lines that belong to one chapter, or to none yet. */
export interface Beat { chapter: ChapterMark | null, lines: Line[] }

export interface Camera {
  name: string
  /** As seen by the viewer. */
  width: number
  height: number
  /** Degrees clockwise that a player must turn the stored picture; a phone held upright writes 90. */
  rotation: 0 | 90
}

interface ClipScriptBase {
  file: string
  captions: string
  camera: Camera
  /** ISO 8601 with the shop's offset from UTC. */
  recordedAt: string
}

export interface SpokenClip extends ClipScriptBase { beats: Beat[] }

/** A second camera running at the same time: it hears the same words from where it stands. */
export interface SecondCameraClip extends ClipScriptBase {
  hears: string
  /** Milliseconds from the start of the clip it hears; recordedAt agrees with it. */
  fromMs: number
  lengthMs: number
  /** Its own pictures, in order; `atMs` counts from its own start. */
  shots: { atMs: number, shot: string }[]
}

export type ClipScript = SpokenClip | SecondCameraClip

export interface SessionScript {
  date: string
  place: string
  temperatureC: number
  humidityPct: number
  notes: string
  stepNumbers: number[]
  /** Somebody has yet to look at it: all its chapters are left to the program. */
  toReview?: boolean
  clips: ClipScript[]
}
