import type { PartView, PlanView } from '#shared/types/plan'
import { hoursText } from '#shared/utils/hours'
import { PART_COLUMNS, STEP_COLUMNS } from './columns'
import { writeMarkdownTable } from './markdownTable'
import { FORMULA_LIKE } from './table'

export type TableFormat = 'csv' | 'md'

/** Writes the steps in use, in order, so that importing the file again changes nothing. */
export function writePlan(plan: PlanView, format: TableFormat): string {
  const nameOf = new Map(plan.parts.map(part => [part.id, part.name]))
  const rows = plan.steps.filter(step => !step.archived).map(step => [
    String(step.number), step.stage, step.title, step.description,
    step.partIds.map(id => nameOf.get(id)).filter(Boolean).join(';'), step.materials.join(';'), hoursText(step.plannedMinutes),
  ])
  return writeTable(STEP_COLUMNS, rows, format)
}

/** Writes the parts in use, in order, so that importing the file again changes nothing. */
export function writeParts(parts: PartView[], format: TableFormat): string {
  const rows = parts.filter(part => !part.archived).map(part => [part.name, part.aliases.join(';'), part.material, amountText(part.thicknessMm), amountText(part.quantity)])
  return writeTable(PART_COLUMNS, rows, format)
}

function writeTable(columns: readonly string[], rows: string[][], format: TableFormat): string {
  if (format === 'md') return writeMarkdownTable(columns, rows)
  // The byte order mark is for spreadsheets, which else take UTF-8 for the machine's old encoding. Line ends as RFC 4180 has them.
  return `\uFEFF${[columns, ...rows].map(cells => cells.map(csvCell).join(',')).join('\r\n')}\r\n`
}

function csvCell(text: string): string {
  const cell = FORMULA_LIKE.test(text) ? `'${text}` : text
  return /[",\n;\t|]/.test(cell) ? `"${cell.replace(/"/g, '""')}"` : cell
}

export function amountText(amount: number | null): string {
  return amount === null ? '' : String(amount)
}
