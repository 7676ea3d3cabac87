import { createHash } from 'node:crypto'
import { and, eq, inArray } from 'drizzle-orm'
import type { PlanFormat, PlanKind, PlanSource } from '#shared/schemas/plan'
import type { ImportPreview, ImportResult } from '#shared/types/planImport'
import type { PlanView } from '#shared/types/plan'
import { DomainError } from '#shared/utils/errors'
import type { Database, Executor, Transaction } from '../database/client'
import { parts, steps } from '../database/schema'
import { kindOfTable, knownHeadings, PART_COLUMNS, STEP_COLUMNS } from '../indexing/plan/columns'
import { compareParts, type PartPlacing } from '../indexing/plan/compareParts'
import { comparePlan, partFinder, type PlanComparison } from '../indexing/plan/comparePlan'
import { placeNewRows } from '../indexing/plan/order'
import { readPartsTable } from '../indexing/plan/readParts'
import { readPlanTable } from '../indexing/plan/readPlan'
import { readTable, unreadable } from '../indexing/plan/table'
import { writeParts, writePlan } from '../indexing/plan/writePlan'
import { enqueuePencillingOfBuild } from './pencil/queue'
import { linkParts, readPlanView } from './plan'
import { lockPlan, writeOrder } from './planOrder'

/** What importing a table would do. Reads only. */
export async function previewImport(executor: Executor, buildId: string, source: PlanSource): Promise<ImportPreview> {
  return prepare(await readPlanView(executor, buildId, { archived: true }), source).preview
}

/**
 * Imports a table in one transaction: adds and changes by number (steps) or name (parts), never removes.
 * @throws DomainError `unreadable` when any row is wrong (nothing is imported), `conflict` when the plan is no
 *   longer the one that the preview named in `seen` was made of
 */
export async function importTable(database: Database, buildId: string, source: PlanSource): Promise<ImportResult> {
  return database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    const plan = await readPlanView(tx, buildId, { archived: true })
    const { preview, steps: comparison, parts: placings } = prepare(plan, source)
    if (preview.problems.length) {
      const message = `${preview.problems.length === 1 ? 'One entry needs' : `${preview.problems.length} entries need`} mending, so nothing was imported. ${preview.problems[0]!.message}`
      throw new DomainError('unreadable', message, { problems: preview.problems })
    }
    if (source.seen !== undefined && source.seen !== preview.seen) {
      throw new DomainError('conflict', 'The plan was changed since this preview was made, so nothing was imported. Look at the new preview and import again.')
    }
    if (comparison) await applySteps(tx, buildId, plan, comparison)
    if (placings) await applyParts(tx, buildId, plan, placings)
    const count = (outcome: string) => preview.rows.filter(row => row.outcome === outcome).length
    // What was filmed before there was a plan is told by it now.
    if (count('new') + count('changed')) await enqueuePencillingOfBuild(tx, buildId)
    return { what: preview.what, added: count('new'), changed: count('changed'), same: count('same'), newParts: preview.newParts.length }
  })
}

export async function exportTable(executor: Executor, buildId: string, what: PlanKind, format: PlanFormat): Promise<string> {
  const plan = await readPlanView(executor, buildId, { archived: false })
  return what === 'steps' ? writePlan(plan, format) : writeParts(plan.parts, format)
}

type Columns = Pick<ImportPreview, 'columns'>
interface Prepared { preview: ImportPreview, steps?: PlanComparison, parts?: PartPlacing[] }

function prepare(plan: PlanView, source: PlanSource): Prepared {
  const table = readTable('text' in source ? source.text : Buffer.from(source.file, 'base64'))
  const what = source.as ?? kindOfTable(table.headings)
  if (!what) throw unreadable(`The first row names no column of a plan, so nothing was read. For steps it names ${STEP_COLUMNS.join(', ')}; for parts ${PART_COLUMNS.join(', ')}.`)
  const columns = knownHeadings(table.headings, what)
  return what === 'steps' ? prepareSteps(plan, { ...readPlanTable(table), columns }) : prepareParts(plan, { ...readPartsTable(table), columns })
}

function prepareSteps(plan: PlanView, { steps: rows, ...reading }: ReturnType<typeof readPlanTable> & Columns): Prepared {
  const comparison = comparePlan(plan, rows)
  const { newParts, restoredParts } = comparison
  const body = { ...reading, rows: comparison.placings.map(placing => placing.preview), newParts, restoredParts, staying: comparison.staying.map(step => `${step.number} ${step.title}`) }
  return { preview: { ...body, seen: digest(plan, body.rows) }, steps: comparison }
}

function prepareParts(plan: PlanView, { parts: rows, ...reading }: ReturnType<typeof readPartsTable> & Columns): Prepared {
  const { placings, staying } = compareParts(plan.parts, rows)
  const body = { ...reading, rows: placings.map(placing => placing.preview), newParts: [], restoredParts: [], staying: staying.map(part => part.name) }
  return { preview: { ...body, seen: digest(plan, body.rows) }, parts: placings }
}

/** Changes whenever the plan or what the table would do to it does. */
function digest(plan: PlanView, rows: unknown): string {
  return createHash('sha256').update(JSON.stringify([plan, rows])).digest('base64url').slice(0, 22)
}

async function applySteps(tx: Transaction, buildId: string, plan: PlanView, { placings, newParts, restoredParts }: PlanComparison): Promise<void> {
  if (restoredParts.length) await tx.update(parts).set({ archivedAt: null }).where(and(eq(parts.buildId, buildId), inArray(parts.name, restoredParts)))
  const added = newParts.length
    ? await tx.insert(parts).values(newParts.map((name, i) => ({ buildId, name, position: plan.parts.length + i }))).returning({ id: parts.id, name: parts.name })
    : []
  const findPart = partFinder([...plan.parts, ...added.map(part => ({ ...part, position: 0, aliases: [], material: '', thicknessMm: null, quantity: null, archived: false }))])

  const order: { id: string, isNew: boolean }[] = []
  for (const { row, step, partNames, preview } of placings) {
    const { stage, title, description, materials, plannedMinutes } = row
    const fields = { stage, title, description, materials, plannedMinutes }
    let id = step?.id
    if (!id) [{ id }] = await tx.insert(steps).values({ ...fields, buildId, number: row.number, position: plan.steps.length }).returning({ id: steps.id }) as [{ id: string }]
    else if (preview.outcome === 'changed') await tx.update(steps).set({ ...fields, archivedAt: null }).where(and(eq(steps.id, id), eq(steps.buildId, buildId)))
    if (partNames && preview.outcome !== 'same') await linkParts(tx, { id, buildId }, partNames.map(name => findPart(name)!.id))
    order.push({ id, isNew: !step })
  }
  await writeOrder(tx, steps, buildId, placeNewRows(plan.steps.map(step => step.id), order))
}

async function applyParts(tx: Transaction, buildId: string, plan: PlanView, placings: PartPlacing[]): Promise<void> {
  const order: { id: string, isNew: boolean }[] = []
  for (const { row, part, preview } of placings) {
    const { name, aliases, material, thicknessMm, quantity } = row
    const fields = { name, aliases, material, thicknessMm, quantity }
    let id = part?.id
    if (!id) [{ id }] = await tx.insert(parts).values({ ...fields, buildId, position: plan.parts.length }).returning({ id: parts.id }) as [{ id: string }]
    else if (preview.outcome === 'changed') await tx.update(parts).set({ ...fields, archivedAt: null }).where(and(eq(parts.id, id), eq(parts.buildId, buildId)))
    order.push({ id, isNew: !part })
  }
  await writeOrder(tx, parts, buildId, placeNewRows(plan.parts.map(part => part.id), order))
}
