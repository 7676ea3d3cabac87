import { partFields } from '#shared/schemas/plan'
import type { TableInfo, TableProblem } from '#shared/types/planImport'
import { parseLength } from '#shared/utils/measures'
import { cellReader, type CellReading, checked, decimal, listOf, nameColumns, type NamedRow, problem, quoted } from './cells'
import { PART_COLUMNS, type PartColumn } from './columns'
import { readTable, type Table } from './table'

/** A part as a table gives it. Fields whose column is not in the table are undefined: they are left alone. */
export interface PartRow {
  row: number
  name: string
  aliases?: string[]
  material?: string
  /** Millimetres. */
  thicknessMm?: number | null
  quantity?: number | null
}

export interface PartsReading extends TableInfo {
  what: 'parts'
  parts: PartRow[]
  problems: TableProblem[]
}

/**
 * Reads a list of parts from a CSV file or Markdown table, without a database.
 * Every row that can be read is given; what is wrong with the others stands in `problems`.
 * @param source a file's bytes, or text
 * @throws DomainError `unreadable` when there is no such table in it
 */
export function readParts(source: Uint8Array | string): PartsReading {
  return readPartsTable(readTable(source))
}

export function readPartsTable(table: Table): PartsReading {
  const { headings: _headings, rows: _rows, ...info } = table
  const { rows, problems, unknownColumns } = nameColumns(table, 'parts', PART_COLUMNS, ['name'])
  const parts: PartRow[] = []
  const rowOfName = new Map<string, number>()
  for (const row of rows) {
    const { part, wrong } = readPart(row)
    const key = part?.name.toLowerCase()
    const earlier = key ? rowOfName.get(key) : undefined
    if (part && earlier) wrong.push(problem(row.row, 'name', `${quoted(part.name)} is already in row ${earlier}. Each part is listed once.`))
    problems.push(...wrong)
    if (!part || !key) continue
    rowOfName.set(key, earlier ?? row.row)
    if (!wrong.length) parts.push(part)
  }
  return { ...info, what: 'parts', unknownColumns, parts, problems: problems.sort((a, b) => a.row - b.row) }
}

function readPart(named: NamedRow<PartColumn>): { part?: PartRow, wrong: TableProblem[] } {
  const wrong: TableProblem[] = []
  const take = cellReader(named, wrong)
  const name = take('name', cell => checked(partFields.name, cell))
  const part = {
    row: named.row,
    aliases: take('aliases', cell => checked(partFields.aliases, listOf(cell))),
    material: take('material', cell => checked(partFields.material, cell)),
    thicknessMm: take('thickness_mm', readThickness),
    quantity: take('quantity', readQuantity),
  }
  return name === undefined ? { wrong } : { part: { ...part, name }, wrong }
}

/** Millimetres as a number; a length with its own unit (`1/4 in`) is read too. */
function readThickness(cell: string): CellReading<number | null> {
  if (!cell.trim()) return { ok: true, value: null }
  const plain = decimal(cell)
  if (plain !== undefined) return checked(partFields.thicknessMm, plain)
  const reading = parseLength(cell, 'mm')
  return reading.ok ? checked(partFields.thicknessMm, reading.length.mm) : { ok: false, message: `${quoted(cell)} is not a thickness in millimetres. Write it as 9 or 6.5.` }
}

function readQuantity(cell: string): CellReading<number | null> {
  const text = cell.trim()
  if (!text) return { ok: true, value: null }
  if (!/^\d+$/.test(text)) return { ok: false, message: `${quoted(cell)} is not a whole number of pieces.` }
  return checked(partFields.quantity, Number(text))
}
