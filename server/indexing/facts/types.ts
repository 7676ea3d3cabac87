export const FACT_KINDS = ['length', 'angle', 'thickness', 'ratio', 'time', 'count', 'temperature', 'adhesive', 'fastener'] as const
export type FactKind = typeof FACT_KINDS[number]
/** Units as facts carry them: millimetres, degrees, minutes, pieces, °C, or a bare ratio. Null: a substance. */
export type FactUnit = 'mm' | 'deg' | 'min' | 'count' | 'C' | 'ratio' | null

/** Something measured, mixed, counted or named in speech. */
export interface SpokenFact {
  /** Start of the cue in which its first word stands, ms. */
  atMs: number
  kind: FactKind
  /** The words as said. */
  text: string
  value: number | null
  unit: FactUnit
}
