import type { ClipFailure, FrameRate, Span } from './media'
import type { ClipState, ClipTask, Inking, Operation, RecordedAtSource, Role, TaskState, Units } from './trade'

/** What the session page reads in one go: GET /api/sessions/:session. Dates are ISO strings, times integer ms. */
export interface SessionDetail {
  id: string
  build: { id: string, name: string, address: string, units: Units }
  role: Role
  /** Calendar date, `2026-09-05`. */
  date: string
  title: string
  place: string
  temperatureC: number | null
  humidityPercent: number | null
  notes: string
  /** Steps ticked as worked on that day. */
  stepIds: string[]
  clips: ClipView[]
  tracks: TrackView[]
  /** How far the program is with pencilling; null until it has something to listen to. */
  pencilling: { state: TaskState, message: string } | null
}

export interface ClipView {
  id: string
  name: string
  sizeBytes: number
  state: ClipState
  failure: ClipFailure | null
  /** Null until probed. */
  durationMs: number | null
  /** Place of the first frame on the session's clock. */
  offsetMs: number
  offsetByHand: boolean
  camera: string
  recordedAt: string | null
  recordedAtSource: RecordedAtSource | null
  video: { width: number, height: number, frameRate: FrameRate } | null
  hasSound: boolean
  /** Where the browser plays it from (the proxy when there is one); null until it can be played. */
  src: string | null
  poster: string | null
  sheets: { intervalMs: number, tileWidth: number, tileHeight: number, columns: number, rows: number, count: number, timesMs: number[], images: string[] } | null
  /** One unsigned byte per 1/perSecond s. */
  peaks: { perSecond: number, count: number, url: string } | null
  sceneChangesMs: number[]
  silences: Span[]
  warnings: string[]
  tasks: TaskView[]
}

export interface TaskView { task: ClipTask, state: TaskState, progress: number, message: string }

export interface TrackView {
  id: string
  clipId: string | null
  name: string
  language: string
  embedded: boolean
  cueCount: number
  /** Why it may belong to another clip; null when nothing speaks against it or a person said that it belongs. */
  doubt: string | null
  warnings: string[]
  failure: string | null
  read: boolean
}

/** GET /api/sessions/:session/cues */
export interface CueView { id: string, trackId: string, clipId: string, startMs: number, endMs: number, text: string, /** Corrected by a person; `original` is then the words as they came. */ edited: boolean, original: string | null, version: number }

/** GET /api/sessions/:session/chapters */
export interface ChapterView {
  id: string
  clipId: string
  /** Half open [startMs, endMs) on the clip. */
  startMs: number
  endMs: number
  stepId: string | null
  operation: Operation
  partIds: string[]
  inking: Inking
  confidence: number | null
  evidence: { atMs: number, words: string }[]
  /** What else it may show, likeliest first. */
  alternatives: { steps: { stepId: string | null, confidence: number }[], operations: { operation: Operation, confidence: number }[] }
  /** The program's own, which it may move and take away. */
  proposed: boolean
  note: string
  version: number
  /** Who inked it; null while it is pencilled. */
  inkedBy: { id: string, name: string } | null
  updatedBy: string | null
}

/** GET /api/builds/:build/sessions: one row a session, newest first. */
export interface SessionSummary {
  id: string
  date: string
  title: string
  place: string
  clipCount: number
  /** Length of all probed clips together, ms; cameras that overlap count each. */
  footageMs: number
  /** Under chapters of either kind, ms. */
  chapteredMs: number
  /** Under inked chapters, ms. */
  inkedMs: number
  uploading: number
  working: number
  failed: number
  captionsWaiting: number
  stepNumbers: number[]
}
