import type { OpenPickup } from './facts'
import type { TaskView } from './session'
import type { Operation, Role, StepStatus, Visibility } from './trade'

/** GET /api/builds/:build/bench: the build's home, a job card of what to do next. Times are integer ms. */
export interface BenchView {
  build: { id: string, name: string, boat: string, address: string, visibility: Visibility }
  role: Role
  counts: { steps: number, sessions: number, clips: number, chapters: number }
  /** Clips on their way, and clips that could not be read. */
  indexing: BenchClip[]
  /** Stretches of ready footage without a chapter, the longest first; `clips` and `ms` count all of them. */
  untagged: { clips: number, ms: number, longest: BenchStretch[] }
  /** Chapters that wait for a person. */
  pencilled: { count: number, first: (BenchStretch & { operation: Operation, step: { number: number, title: string } | null })[] }
  /** Said to have been done off camera, and still to be filmed. */
  pickups: { count: number, first: OpenPickup[] }
  /** Steps begun or done of which nothing is filmed, and how many steps have footage at all. */
  unfilmed: { shown: number, steps: BenchStep[] }
  next: BenchStep[]
  sessions: { id: string, date: string, title: string, place: string, clips: number, durationMs: number, chapters: number }[]
}

export interface BenchClip { id: string, name: string, sessionId: string, state: 'uploading' | 'waiting' | 'working' | 'failed', message: string, progress: number, tasks: TaskView[] }
export interface BenchStretch { clipId: string, clipName: string, sessionId: string, date: string, startMs: number, endMs: number }
export interface BenchStep { id: string, number: number, title: string, stage: string, status: StepStatus, plannedMinutes: number | null }
