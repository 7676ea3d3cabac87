import type { FieldChange, PreviewRow } from '#shared/types/planImport'
import type { PartView } from '#shared/types/plan'
import { changed } from './comparePlan'
import { amountText } from './writePlan'
import type { PartRow } from './readParts'

export interface PartPlacing { row: PartRow, part: PartView | null, preview: PreviewRow }

/** Sets a table's parts beside the build's: which are new, which change and how. Matched by name, whatever its letter case. */
export function compareParts(parts: PartView[], rows: PartRow[]): { placings: PartPlacing[], staying: PartView[] } {
  const byName = new Map(parts.map(part => [part.name.toLowerCase(), part]))
  const placings = rows.map((row): PartPlacing => {
    const part = byName.get(row.name.toLowerCase()) ?? null
    const changes = part ? partChanges(row, part) : []
    const outcome = !part ? 'new' : changes.length || part.archived ? 'changed' : 'same'
    return { row, part, preview: { row: row.row, number: null, title: row.name, outcome, restored: part?.archived ?? false, changes } }
  })
  const named = new Set(rows.map(row => row.name.toLowerCase()))
  return { placings, staying: parts.filter(part => !part.archived && !named.has(part.name.toLowerCase())) }
}

function partChanges(row: PartRow, part: PartView): FieldChange[] {
  return [
    ...changed('name', part.name, row.name),
    ...changed('aliases', part.aliases.join('; '), row.aliases?.join('; ')),
    ...changed('material', part.material, row.material),
    ...changed('thickness_mm', amountText(part.thicknessMm), row.thicknessMm === undefined ? undefined : amountText(row.thicknessMm)),
    ...changed('quantity', amountText(part.quantity), row.quantity === undefined ? undefined : amountText(row.quantity)),
  ]
}
