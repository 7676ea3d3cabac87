import type { z } from 'zod'
import { cleanLine } from '#shared/schemas/text'
import type { TableProblem } from '#shared/types/planImport'
import { MOST_ROWS } from '#shared/schemas/plan'
import { columnsOf, type TableKind } from './columns'
import { type Table, unreadable } from './table'

/** A row of a table with its cells by column; a column that the table does not have is undefined. */
export interface NamedRow<Column extends string> { row: number, cells: Partial<Record<Column, string>> }

export interface NamedTable<Column extends string> {
  columns: Column[]
  unknownColumns: string[]
  rows: NamedRow<Column>[]
  problems: TableProblem[]
}

/**
 * Finds the columns of a table by their headings, in any order and letter case.
 * @throws DomainError `unreadable` when a required column is missing or one comes twice
 */
export function nameColumns<Column extends string>(table: Table, kind: TableKind, known: readonly Column[], required: readonly Column[]): NamedTable<Column> {
  const names = columnsOf(table.headings, kind)
  const twice = known.find(column => names.indexOf(column) !== names.lastIndexOf(column))
  if (twice) throw unreadable(`The column “${twice}” is there twice. Nothing was read. Take one of them out.`)
  const missing = required.filter(column => !names.includes(column))
  if (missing.length) {
    throw unreadable(`The table has no column ${missing.map(column => `“${column}”`).join(' and no column ')}. Nothing was read. Its first row must name the columns: ${known.join(', ')}.`)
  }
  if (!table.rows.length) throw unreadable('The table has a heading and no rows. Nothing was read.')
  if (table.rows.length > MOST_ROWS) throw unreadable(`The table has ${table.rows.length.toLocaleString('en-GB')} rows; at most ${MOST_ROWS.toLocaleString('en-GB')} can be imported. Nothing was read.`)

  const columns = known.filter(column => names.includes(column))
  const problems: TableProblem[] = []
  const rows = table.rows.map(({ row, cells }) => {
    const spare = cells.slice(names.length).filter(cell => cell.trim()).length
    if (spare) problems.push(problem(row, null, `has ${names.length + spare} cells under ${names.length} headings. ${table.layout === 'csv' ? 'Put quotation marks round a text that holds the separator' : 'Write \\| for a bar inside a cell'}.`))
    return { row, cells: Object.fromEntries(columns.map(column => [column, cells[names.indexOf(column)] ?? ''])) as Partial<Record<Column, string>> }
  })
  return { columns, rows, problems, unknownColumns: unknownColumns(table, i => known.includes(names[i] as Column)) }
}

/** Headings that mean nothing here, and columns without a heading that hold something. */
function unknownColumns({ headings, rows }: Table, isKnown: (index: number) => boolean): string[] {
  return headings.flatMap((heading, i) => {
    if (isKnown(i)) return []
    if (heading) return [heading]
    return rows.some(({ cells }) => cells[i]?.trim()) ? [`column ${i + 1}, which has no heading`] : []
  })
}

/** Returns the function that reads one cell of `row` and notes in `wrong` what cannot be read; undefined for a column that is not there. */
export function cellReader<Column extends string>({ row, cells }: NamedRow<Column>, wrong: TableProblem[]) {
  return <T>(column: Column, read: (cell: string) => CellReading<T>): T | undefined => {
    const cell = cells[column]
    if (cell === undefined) return undefined
    const reading = read(cell)
    if (reading.ok) return reading.value
    wrong.push(problem(row, column, reading.message))
    return undefined
  }
}

export function problem(row: number, column: string | null, message: string): TableProblem {
  return { row, column, message: column ? `Row ${row}, ${column}: ${message}` : `Row ${row} ${message}` }
}

/** One value of a cell, or what is wrong with it. */
export type CellReading<T> = { ok: true, value: T } | { ok: false, message: string }

/** Holds a value to the rule that the forms have too. */
export function checked<Schema extends z.ZodType>(schema: Schema, value: unknown): CellReading<z.output<Schema>> {
  const result = schema.safeParse(value)
  return result.success ? { ok: true, value: result.data } : { ok: false, message: `${result.error.issues[0]!.message}.` }
}

export const listOf = (cell: string): string[] => cell.split(';').map(cleanLine).filter(Boolean)

/** A decimal number written with a point or a comma. */
export function decimal(cell: string): number | undefined {
  const text = cleanLine(cell)
  return /^(?:\d+(?:[.,]\d*)?|[.,]\d+)$/.test(text) ? Number(text.replace(',', '.')) : undefined
}

/** As much of a cell as fits in a message. */
export function quoted(cell: string): string {
  const text = cleanLine(cell)
  return `“${text.length > 40 ? `${text.slice(0, 39)}…` : text}”`
}
