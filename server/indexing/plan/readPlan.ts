import { partFields, stepFields } from '#shared/schemas/plan'
import { distinct } from '#shared/schemas/text'
import type { TableInfo, TableProblem } from '#shared/types/planImport'
import { parseHours } from '#shared/utils/hours'
import { cellReader, type CellReading, checked, listOf, nameColumns, type NamedRow, problem, quoted } from './cells'
import { STEP_COLUMNS, type StepColumn } from './columns'
import { readTable, type Table } from './table'

/** A step as a table gives it. Fields whose column is not in the table are undefined: they are left alone. */
export interface StepRow {
  row: number
  number: number
  title: string
  stage?: string
  description?: string
  /** Names of parts, as written. */
  parts?: string[]
  materials?: string[]
  plannedMinutes?: number | null
}

export interface PlanReading extends TableInfo {
  what: 'steps'
  steps: StepRow[]
  problems: TableProblem[]
}

/**
 * Reads the steps of a plan from a CSV file or Markdown table, without a database.
 * Every row that can be read is given; what is wrong with the others stands in `problems`.
 * @param source a file's bytes, or text
 * @throws DomainError `unreadable` when there is no such table in it
 */
export function readPlan(source: Uint8Array | string): PlanReading {
  return readPlanTable(readTable(source))
}

export function readPlanTable(table: Table): PlanReading {
  const { headings: _headings, rows: _rows, ...info } = table
  const { rows, problems, unknownColumns } = nameColumns(table, 'steps', STEP_COLUMNS, ['number', 'title'])
  const steps: StepRow[] = []
  const rowOfNumber = new Map<number, number>()
  for (const row of rows) {
    const { step, wrong } = readStep(row)
    const earlier = step && rowOfNumber.get(step.number)
    if (earlier) wrong.push(problem(row.row, 'number', `${step.number} is already the number of row ${earlier}. Each step needs its own.`))
    problems.push(...wrong)
    if (!step) continue
    rowOfNumber.set(step.number, earlier ?? row.row)
    if (!wrong.length) steps.push(step)
  }
  return { ...info, what: 'steps', unknownColumns, steps, problems: problems.sort((a, b) => a.row - b.row) }
}

/** The step is given, even when other cells of it are wrong, as soon as its number is known. */
function readStep(named: NamedRow<StepColumn>): { step?: StepRow, wrong: TableProblem[] } {
  const wrong: TableProblem[] = []
  const take = cellReader(named, wrong)
  const number = take('number', readNumber)
  const step = {
    row: named.row,
    title: take('title', cell => checked(stepFields.title, cell)) ?? '',
    stage: take('stage', cell => checked(stepFields.stage, cell)),
    description: take('description', cell => checked(stepFields.description, cell)),
    parts: take('parts', readPartNames),
    materials: take('materials', cell => checked(stepFields.materials, listOf(cell))),
    plannedMinutes: take('planned_hours', readHours),
  }
  return number === undefined ? { wrong } : { step: { ...step, number }, wrong }
}

function readNumber(cell: string): CellReading<number> {
  const text = cell.trim()
  if (!text) return { ok: false, message: 'There is none. Each step needs its number.' }
  if (!/^\d+$/.test(text)) return { ok: false, message: `${quoted(cell)} is not a whole number.` }
  return checked(stepFields.number, Number(text))
}

function readPartNames(cell: string): CellReading<string[]> {
  const names = distinct(listOf(cell))
  for (const name of names) {
    const reading = checked(partFields.name, name)
    if (!reading.ok) return { ok: false, message: `${quoted(name)}: ${reading.message}` }
  }
  return names.length > 200 ? { ok: false, message: 'At most 200 parts to a step.' } : { ok: true, value: names }
}

/** Hours as a number, kept as whole minutes. */
function readHours(cell: string): CellReading<number | null> {
  const reading = parseHours(cell)
  return reading.ok ? checked(stepFields.plannedMinutes, reading.minutes) : reading
}
