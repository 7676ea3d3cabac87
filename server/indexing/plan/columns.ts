/** The columns of a plan's tables, in the order in which they are written. */
export const STEP_COLUMNS = ['number', 'stage', 'title', 'description', 'parts', 'materials', 'planned_hours'] as const
export const PART_COLUMNS = ['name', 'aliases', 'material', 'thickness_mm', 'quantity'] as const
export type StepColumn = typeof STEP_COLUMNS[number]
export type PartColumn = typeof PART_COLUMNS[number]

/** A heading as it is compared: `Planned hours`, `PLANNED-HOURS` and `planned_hours` are one; so are `thickness (mm)` and `thickness_mm`. */
export function columnName(heading: string): string {
  return heading.toLowerCase().replace(/[^\p{L}\p{N}]+/gu, '_').replace(/^_+|_+$/g, '')
}

export type TableKind = 'steps' | 'parts'
const KNOWN: Record<TableKind, readonly string[]> = { steps: STEP_COLUMNS, parts: PART_COLUMNS }

/** What people head the same columns with in sheets of their own. A bare "thickness" is left out: nobody knows its unit. */
const ALIASES: Record<TableKind, Record<string, string>> = {
  steps: { no: 'number', nr: 'number', step: 'number', step_no: 'number', step_number: 'number', phase: 'stage', section: 'stage', step_title: 'title', task: 'title', details: 'description', what_to_do: 'description', material: 'materials', hours: 'planned_hours', hours_planned: 'planned_hours' },
  parts: { part: 'name', part_name: 'name', item: 'name', qty: 'quantity', count: 'quantity', pcs: 'quantity', pieces: 'quantity', how_many: 'quantity', alias: 'aliases', also_called: 'aliases', other_names: 'aliases', materials: 'material', timber: 'material', wood: 'material', thickness_in_mm: 'thickness_mm' },
}

/** The column that each heading means in a table of this kind, or its own name when it means none. The column's own name goes before what stands for it. */
export function columnsOf(headings: string[], kind: TableKind): string[] {
  const names = headings.map(columnName)
  const taken = new Set(names)
  return names.map((name) => {
    const meant = ALIASES[kind][name]
    if (!meant || taken.has(meant) || KNOWN[kind].includes(name)) return name
    taken.add(meant)
    return meant
  })
}

/** The headings, as written, that mean something in a table of this kind. */
export function knownHeadings(headings: string[], kind: TableKind): string[] {
  const columns = columnsOf(headings, kind)
  return headings.filter((_, i) => KNOWN[kind].includes(columns[i]!))
}

const countKind = (headings: string[], kind: TableKind) => knownHeadings(headings, kind).length
/** Headings that mean something in either kind of table; one that does in both counts twice. */
export const countColumns = (headings: string[]) => countKind(headings, 'steps') + countKind(headings, 'parts')

/** What a table holds, judged by its headings; undefined when they say nothing. */
export function kindOfTable(headings: string[]): TableKind | undefined {
  const [steps, parts] = [countKind(headings, 'steps'), countKind(headings, 'parts')]
  if (!steps && !parts) return undefined
  return parts > steps ? 'parts' : 'steps'
}
