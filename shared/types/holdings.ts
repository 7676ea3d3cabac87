/** What goes when a clip, a session or a build is deleted: GET /api/{clips,sessions,builds}/:id/holdings. */
export interface Holdings {
  /** Sessions of a build; 0 for a session or a clip. */
  sessions: number
  /** Clips of a session or a build; 0 for a clip. */
  clips: number
  /** Length of all probed clips together, ms. */
  footageMs: number
  chapters: number
  inked: number
  captions: number
  /** Captions that a person has corrected. */
  corrected: number
}
