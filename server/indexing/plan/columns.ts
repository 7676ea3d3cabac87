/** The columns of a plan's tables, in the order in which they are written. */
export const STEP_COLUMNS = ['number', 'stage', 'title', 'description', 'parts', 'materials', 'planned_hours'] as const
export const PART_COLUMNS = ['name', 'aliases', 'material', 'thickness_mm', 'quantity'] as const
export type StepColumn = typeof STEP_COLUMNS[number]
export type PartColumn = typeof PART_COLUMNS[number]

/** A heading as it is compared: `Planned hours`, `PLANNED-HOURS` and `planned_hours` are one; so are `thickness (mm)` and `thickness_mm`. */
export function columnName(heading: string): string {
  return heading.toLowerCase().replace(/[^\p{L}\p{N}]+/gu, '_').replace(/^_+|_+$/g, '')
}

const STEPS: readonly string[] = STEP_COLUMNS
const PARTS: readonly string[] = PART_COLUMNS

export const countStepColumns = (headings: string[]) => headings.filter(heading => STEPS.includes(columnName(heading))).length
export const countPartColumns = (headings: string[]) => headings.filter(heading => PARTS.includes(columnName(heading))).length
export const countColumns = (headings: string[]) => countStepColumns(headings) + countPartColumns(headings)

/** What a table holds, judged by its headings; undefined when they say nothing. */
export function kindOfTable(headings: string[]): 'steps' | 'parts' | undefined {
  const steps = countStepColumns(headings)
  const parts = countPartColumns(headings)
  if (!steps && !parts) return undefined
  return parts > steps ? 'parts' : 'steps'
}
