import type { FactKind, FactUnit, Inking, PickupState } from './trade'

/** GET /api/sessions/:session/facts and /api/builds/:build/facts. Something measured, mixed, counted or named aloud. */
export interface FactView {
  id: string
  sessionId: string
  clipId: string
  /** When it is said, ms of the clip. */
  atMs: number
  stepId: string | null
  kind: FactKind
  /** The words as said; they stay when the value is mended. */
  said: string
  value: number | null
  unit: FactUnit | null
  inking: Inking
  proposed: boolean
  version: number
  inkedBy: { id: string, name: string } | null
}

/** GET /api/sessions/:session/pickups. Something that was said to have been done off camera. */
export interface PickupView {
  id: string
  sessionId: string
  clipId: string
  atMs: number
  stepId: string | null
  words: string
  state: PickupState
  proposed: boolean
  version: number
}

/** One that is still to be filmed, for the bench. */
export interface OpenPickup extends PickupView { date: string, step: { number: number, title: string } | null }
