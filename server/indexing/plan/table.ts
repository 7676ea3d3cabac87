import { CsvError, parse } from 'csv-parse/sync'
import { DomainError } from '#shared/utils/errors'
import type { TableInfo } from '#shared/types/planImport'
import { decodeCaptionBytes, looksBinary } from '../captions/encoding'
import { countColumns } from './columns'
import { findMarkdownTable } from './markdownTable'

/** A table before anybody has asked what its cells mean. */
export interface Table extends Omit<TableInfo, 'unknownColumns'> {
  headings: string[]
  /** Rows that hold anything, with their place as a spreadsheet counts (the heading is row 1). */
  rows: { row: number, cells: string[] }[]
}

const SEPARATORS = [',', ';', '\t', '|'] as const

/**
 * Reads a table from a file's bytes or from pasted text: CSV with commas, semicolons or tabs (found by
 * which of them makes known headings), or the first fitting table of a Markdown text. Bytes are UTF-8
 * with or without a byte order mark, UTF-16 with one, or Windows-1252.
 * @throws DomainError `unreadable` when there is no table in it
 */
export function readTable(source: Uint8Array | string): Table {
  const { text, encoding, warning } = typeof source === 'string' ? { text: source.replace(/^\uFEFF/, ''), encoding: 'text', warning: undefined } : decodeCaptionBytes(source)
  if (looksBinary(text)) throw unreadable('This is not a text file. Save the sheet as CSV, or copy its cells and paste them.')
  if (!text.trim()) throw unreadable('There is nothing in it. The first row must name the columns, and each row after it is a step or a part.')
  const warnings = warning ? [warning] : []

  const { separator, known } = findSeparator(text)
  // Two known headings in the first row make it CSV, whatever its cells hold; else a Markdown table may stand anywhere in the text.
  const markdown = known < 2 || separator === '|' ? findMarkdownTable(text) : undefined
  if (markdown) {
    if (markdown.more) warnings.push('Only the first table in the text was read.')
    return { layout: 'markdown', separator: '|', encoding, warnings, ...withRows(markdown.records) }
  }
  const records = parseCsv(text, separator).map(cells => cells.map(bareCell))
  return { layout: 'csv', separator, encoding, warnings, ...withRows(records) }
}

/** A spreadsheet takes a cell that begins so for a formula; export puts an apostrophe before it, which goes again here. */
export const FORMULA_LIKE = /^'*[=+\-@]/

function bareCell(cell: string): string {
  return cell.startsWith('\'') && FORMULA_LIKE.test(cell) ? cell.slice(1) : cell
}

function withRows(records: string[][]): Pick<Table, 'headings' | 'rows'> {
  const filled = records.map((cells, i) => ({ row: i + 1, cells })).filter(({ cells }) => cells.some(cell => cell.trim()))
  const [head, ...rows] = filled
  return { headings: (head?.cells ?? []).map(cell => cell.trim()), rows }
}

/** The separator that yields most known headings in the first row that holds anything; a comma when none does. */
function findSeparator(text: string): { separator: typeof SEPARATORS[number], known: number } {
  const head = text.trimStart().slice(0, 5000)
  const scores = SEPARATORS.map(separator => ({ separator, known: knownHeadings(head, separator) }))
  return scores.reduce((best, next) => next.known > best.known ? next : best)
}

function knownHeadings(text: string, separator: string): number {
  try {
    return countColumns((parse(text, { ...CSV, delimiter: separator, to: 1 })[0] as string[] | undefined) ?? [])
  }
  catch {
    return 0
  }
}

const CSV = { relax_column_count: true, relax_quotes: true } as const

function parseCsv(text: string, separator: string): string[][] {
  try {
    return parse(text, { ...CSV, delimiter: separator }) as string[][]
  }
  catch (error) {
    if (!(error instanceof CsvError)) throw error
    if (error.code === 'CSV_QUOTE_NOT_CLOSED') {
      throw unreadable(`A quotation mark that opens a cell near line ${error.lines ?? '?'} is never closed, so the rest cannot be told apart. Nothing was read. Close it, or leave it out.`)
    }
    throw unreadable(`The table cannot be read: ${error.message}. Nothing was read.`)
  }
}

export function unreadable(message: string): DomainError {
  return new DomainError('unreadable', message)
}
