import { and, asc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm'
import type { ChangeStep, NewStep } from '#shared/schemas/plan'
import type { PlanView, StepView } from '#shared/types/plan'
import { DomainError, notFound } from '#shared/utils/errors'
import type { Database, Executor, Transaction } from '../database/client'
import { parts, type Step, stepParts, steps } from '../database/schema'
import { reorder } from '../indexing/plan/order'
import { listParts } from './parts'
import { lockPlan, writeOrder } from './planOrder'
import { refreshPassagesNaming } from './search/passages'

/** The whole plan in order. Archived steps and parts only for those who work on the build. */
export async function readPlanView(executor: Executor, buildId: string, options: { archived: boolean }): Promise<PlanView> {
  const stepRows = await executor.select().from(steps)
    .where(and(eq(steps.buildId, buildId), options.archived ? undefined : isNull(steps.archivedAt)))
    .orderBy(asc(steps.position), asc(steps.number))
  const links = await partLinks(executor, eq(steps.buildId, buildId))
  return {
    steps: stepRows.map(step => stepView(step, links.get(step.id) ?? [])),
    parts: await listParts(executor, buildId, options),
  }
}

/** @throws DomainError `bad-input` when the step is not in this build's plan */
export async function requireStepOf(executor: Executor, buildId: string, stepId: string): Promise<void> {
  const [step] = await executor.select({ id: steps.id }).from(steps).where(and(eq(steps.id, stepId), eq(steps.buildId, buildId)))
  if (!step) throw new DomainError('bad-input', 'That step is not in this build’s plan. Nothing was changed.')
}

export async function readStep(executor: Executor, stepId: string): Promise<StepView> {
  const [step] = await executor.select().from(steps).where(eq(steps.id, stepId))
  if (!step) throw notFound('That step')
  return stepView(step, (await partLinks(executor, eq(steps.id, stepId))).get(stepId) ?? [])
}

/** Parts of steps, in the order of the parts list. Archived parts keep their links unseen, so that they come back with them. */
async function partLinks(executor: Executor, which: ReturnType<typeof eq>): Promise<Map<string, string[]>> {
  const rows = await executor.select({ stepId: stepParts.stepId, partId: stepParts.partId }).from(stepParts)
    .innerJoin(steps, eq(steps.id, stepParts.stepId))
    .innerJoin(parts, eq(parts.id, stepParts.partId))
    .where(and(which, isNull(parts.archivedAt)))
    .orderBy(asc(parts.position), asc(parts.name))
  const links = new Map<string, string[]>()
  for (const { stepId, partId } of rows) links.set(stepId, [...links.get(stepId) ?? [], partId])
  return links
}

/** @throws DomainError `conflict` when the number is taken, `bad-input` when a part or the step before is of another build */
export async function addStep(database: Database, buildId: string, input: NewStep): Promise<StepView> {
  return database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    const { afterId, partIds, ...fields } = input
    const standing = await tx.select({ id: steps.id, number: steps.number }).from(steps).where(eq(steps.buildId, buildId)).orderBy(asc(steps.position), asc(steps.number))
    const number = fields.number ?? Math.max(0, ...standing.map(step => step.number)) + 1
    await requireFreeNumber(tx, buildId, number)
    const at = afterId ? standing.findIndex(step => step.id === afterId) + 1 : standing.length
    if (at === 0 && afterId) throw new DomainError('bad-input', 'The step it should stand behind is not in this plan. Nothing was added; reload the page.')
    const [step] = await tx.insert(steps).values({ ...fields, buildId, number, position: standing.length }).returning()
    await linkParts(tx, step!, partIds)
    await writeOrder(tx, steps, buildId, standing.map(other => other.id).toSpliced(at, 0, step!.id))
    return readStep(tx, step!.id)
  })
}

/** Changes the fields that are given; `archived: false` brings a step back where it stood. */
export async function changeStep(database: Database, buildId: string, stepId: string, change: ChangeStep): Promise<StepView> {
  return database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    const { partIds, archived, ...fields } = change
    if (fields.number !== undefined) await requireFreeNumber(tx, buildId, fields.number, stepId)
    const [step] = await tx.update(steps)
      .set({ ...fields, updatedAt: new Date(), ...(archived === undefined ? {} : { archivedAt: archived ? sql`coalesce(${steps.archivedAt}, now())` : null }) })
      .where(and(eq(steps.id, stepId), eq(steps.buildId, buildId))).returning()
    if (!step) throw notFound('That step')
    if (partIds) await linkParts(tx, step, partIds)
    if (fields.title !== undefined) await refreshPassagesNaming(tx, { stepId })
    return readStep(tx, stepId)
  })
}

export async function orderSteps(database: Database, buildId: string, ids: string[]): Promise<void> {
  await database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    const standing = await tx.select({ id: steps.id, archived: isNotNull(steps.archivedAt).mapWith(Boolean) }).from(steps).where(eq(steps.buildId, buildId)).orderBy(asc(steps.position), asc(steps.number))
    const order = reorder(standing, ids)
    if (!order) throw new DomainError('conflict', 'Steps were added or archived in the meantime, so the new order was not kept. The plan is shown as it stands now.')
    await writeOrder(tx, steps, buildId, order)
  })
}

/** Makes `partIds` the parts of a step; links to archived parts stay. */
export async function linkParts(tx: Transaction, step: Pick<Step, 'id' | 'buildId'>, partIds: string[]): Promise<void> {
  const ours = partIds.length ? await tx.select({ id: parts.id }).from(parts).where(and(inArray(parts.id, partIds), eq(parts.buildId, step.buildId))) : []
  if (ours.length !== partIds.length) throw new DomainError('bad-input', 'One of the parts is not in this build\'s list. Nothing was changed; reload the page.', { issues: [{ path: 'partIds', message: 'Choose parts of this build' }] })
  await tx.delete(stepParts).where(and(eq(stepParts.stepId, step.id), inArray(stepParts.partId, tx.select({ id: parts.id }).from(parts).where(and(eq(parts.buildId, step.buildId), isNull(parts.archivedAt))))))
  if (partIds.length) await tx.insert(stepParts).values(partIds.map(partId => ({ stepId: step.id, partId }))).onConflictDoNothing()
}

async function requireFreeNumber(tx: Transaction, buildId: string, number: number, exceptId?: string): Promise<void> {
  const [taken] = await tx.select({ id: steps.id, title: steps.title, archivedAt: steps.archivedAt }).from(steps).where(and(eq(steps.buildId, buildId), eq(steps.number, number)))
  if (!taken || taken.id === exceptId) return
  const message = `Number ${number} is taken by “${taken.title}”${taken.archivedAt ? ', which is archived' : ''}. Nothing was changed; choose another number.`
  throw new DomainError('conflict', message, { issues: [{ path: 'number', message: `${number} is taken` }] })
}

function stepView(step: Step, partIds: string[]): StepView {
  const { id, number, position, stage, title, description, materials, status, plannedMinutes, spentMinutes } = step
  return { id, number, position, stage, title, description, materials, partIds, status, plannedMinutes, spentMinutes, archived: step.archivedAt !== null }
}
