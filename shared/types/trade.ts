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

export const STEP_STATUSES = ['to-do', 'under-way', 'done'] as const
export type StepStatus = typeof STEP_STATUSES[number]

/** Where a clip stands on its way from the phone to the ribband. */
export const CLIP_STATES = ['uploading', 'waiting', 'working', 'ready', 'failed'] as const
export type ClipState = typeof CLIP_STATES[number]

/** How a clip's recorded-at time was found; `hand` is never overwritten by the program. */
export const RECORDED_AT_SOURCES = ['container', 'name', 'order', 'hand'] as const
export type RecordedAtSource = typeof RECORDED_AT_SOURCES[number]

/** Background work on a clip; a row per clip and task, which the page reads. */
export const CLIP_TASKS = ['probe-clip', 'index-footage', 'make-proxy', 'read-captions'] as const
export type ClipTask = typeof CLIP_TASKS[number]

/** Kinds of what is said to measure, mix or count; as server/indexing/facts hears them. */
export const FACT_KINDS = ['length', 'angle', 'thickness', 'ratio', 'time', 'count', 'temperature', 'adhesive', 'fastener'] as const
export type FactKind = typeof FACT_KINDS[number]
/** Millimetres, degrees, minutes, pieces, °C, or a bare ratio. */
export const FACT_UNITS = ['mm', 'deg', 'min', 'count', 'C', 'ratio'] as const
export type FactUnit = typeof FACT_UNITS[number]

/** A pick-up is still to be filmed, filmed, or not wanted. */
export const PICKUP_STATES = ['open', 'done', 'dismissed'] as const
export type PickupState = typeof PICKUP_STATES[number]

export const TASK_STATES = ['waiting', 'working', 'done', 'failed'] as const
export type TaskState = typeof TASK_STATES[number]
