import { countColumns } from './columns'

const DIVIDER = /^\s*\|?\s*:?-+:?\s*(?:\|\s*:?-+:?\s*)*\|?\s*$/

export interface MarkdownTable {
  records: string[][]
  /** True when a second table follows, which is not read. */
  more: boolean
}

/**
 * Finds the first table of a Markdown text whose heading names at least one column of ours: a line of
 * cells, a line of dashes, then rows until a line without a bar (tables of GitHub Flavored Markdown,
 * section 4.10). `undefined` when there is none.
 */
export function findMarkdownTable(text: string): MarkdownTable | undefined {
  const lines = text.split(/\r\n?|\n/)
  const isHead = (i: number) => lines[i - 1]!.includes('|') && lines[i]!.includes('|') && DIVIDER.test(lines[i]!) && countColumns(splitRow(lines[i - 1]!)) > 0
  const dividers = lines.flatMap((_, i) => i > 0 && isHead(i) ? [i] : [])
  const divider = dividers[0]
  if (divider === undefined) return undefined
  const after = lines.slice(divider + 1)
  const end = after.findIndex(line => !line.includes('|'))
  const body = end < 0 ? after : after.slice(0, end)
  return { records: [lines[divider - 1]!, ...body].map(splitRow), more: dividers.length > 1 }
}

/** Cells of one row; `\|` is a bar inside a cell, `<br>` a new line. */
function splitRow(row: string): string[] {
  const inner = row.trim().replace(/^\|/, '')
  const cells = [...inner.matchAll(/((?:\\.|[^\\|])*)(\||\\?$)/gs)].filter(found => found[0] !== '').map(found => found[1]!)
  return cells.map(readCell)
}

function readCell(cell: string): string {
  return cell.trim().replace(/\\([!-/:-@[-`{-~])|<br\s*\/?>/gi, (_, sign: string | undefined) => sign ?? '\n')
}

/** The opposite of reading: what would otherwise end the cell or mean something is escaped. */
export function writeMarkdownTable(headings: readonly string[], rows: string[][]): string {
  const line = (cells: readonly string[]) => `| ${cells.join(' | ')} |`
  const written = rows.map(cells => line(cells.map(writeCell)))
  return [line(headings), line(headings.map(() => '---')), ...written].join('\n') + '\n'
}

function writeCell(text: string): string {
  return text.replace(/[\\|<]/g, sign => `\\${sign}`).replace(/\n/g, '<br>')
}
