import type { Role, Units, Visibility } from './trade'

/** GET /api/builds/:build. Role is null for someone who only watches. */
export interface BuildView {
  id: string
  address: string
  name: string
  boat: string
  about: string
  units: Units
  visibility: Visibility
  role: Role | null
  createdAt: string
}

/** GET /api/builds: the builds one is a member of, the last one worked on first. */
export interface BuildSummary extends BuildView {
  role: Role
  stepCount: number
  doneCount: number
  sessionCount: number
  /** Date of the last session, ISO; null before the first. */
  lastSession: string | null
}
