/** The operations a chapter can show; one per chapter. */
export const OPERATIONS = ['mark-out', 'cut', 'shape', 'dry-fit', 'drill', 'seal-coat', 'glue', 'fasten', 'fillet', 'laminate', 'sand-fair', 'paint', 'clean-up', 'plan-talk', 'none'] as const
export type Operation = typeof OPERATIONS[number]

/** Pencilled: proposed by the program. Inked: made or confirmed by a person. */
export const INKINGS = ['pencilled', 'inked'] as const
export type Inking = typeof INKINGS[number]

export const ROLES = ['builder', 'crew', 'follower'] as const
export type Role = typeof ROLES[number]

export const VISIBILITIES = ['private', 'unlisted', 'public'] as const
export type Visibility = typeof VISIBILITIES[number]

export const UNITS = ['inch', 'mm'] as const
export type Units = typeof UNITS[number]
