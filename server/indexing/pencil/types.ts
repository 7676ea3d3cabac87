import type { Operation } from '#shared/types/trade'

/** A caption cue of one clip, times in ms of that clip. */
export interface SpokenCue { startMs: number, endMs: number, text: string }

/** What was said over one clip, cues by start. */
export interface SpokenClip {
  cues: SpokenCue[]
  /** Length of the clip, ms; when it is not known the last cue ends it. */
  durationMs?: number
  /** Times at which the picture changes, ms. */
  sceneChangesMs?: number[]
}

export interface PlanStep {
  number: number
  stage: string
  title: string
  description: string
  /** Names of parts, as in the list of parts. */
  parts: string[]
  materials: string[]
}

export interface PlanPart { name: string, aliases: string[], material: string, thicknessMm: number | null }

/** Speech that a person has tied to a step: the builder's own words for it. */
export interface Learned { step: number, operation: Operation, text: string }

/** A chapter that a person made or confirmed; the rest is aligned around it. Times in ms of the clip. */
export interface FixedChapter { clip: number, startMs: number, endMs: number, step: number | null, operation: Operation }

export interface EvidenceWords { atMs: number, words: string }

export interface Likely { step: number | null, operation: Operation, confidence: number }

export interface PencilledChapter {
  clip: number
  startMs: number
  endMs: number
  step: number | null
  operation: Operation
  /** Names of the parts spoken of or worked on. */
  parts: string[]
  /** 0 to 1: how likely the step is the right one. */
  confidence: number
  evidence: EvidenceWords[]
  /** What else it may be, likeliest first, at most three steps. */
  otherSteps: { step: number | null, confidence: number }[]
  otherOperations: { operation: Operation, confidence: number }[]
  /** True when it was given, not proposed. */
  fixed: boolean
}

/** What a chapter can show, as the model counts it: 14 operations on a step, and three kinds without one. */
export const WORK_KINDS = ['mark-out', 'cut', 'shape', 'dry-fit', 'drill', 'seal-coat', 'glue', 'fasten', 'fillet', 'laminate', 'sand-fair', 'paint', 'clean-up', 'plan-talk'] as const
export const STEPLESS_KINDS = ['none', 'plan-talk', 'clean-up'] as const
