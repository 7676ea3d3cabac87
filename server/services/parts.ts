import { and, asc, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import type { ChangePart, NewPart } from '#shared/schemas/plan'
import type { PartView } from '#shared/types/plan'
import { DomainError, notFound } from '#shared/utils/errors'
import type { Database, Executor, Transaction } from '../database/client'
import { type Part, parts } from '../database/schema'
import { reorder } from '../indexing/plan/order'
import { lockPlan, writeOrder } from './planOrder'
import { refreshPassagesNaming } from './search/passages'

export async function listParts(executor: Executor, buildId: string, options: { archived: boolean }): Promise<PartView[]> {
  const rows = await executor.select().from(parts)
    .where(and(eq(parts.buildId, buildId), options.archived ? undefined : isNull(parts.archivedAt)))
    .orderBy(asc(parts.position), asc(parts.name))
  return rows.map(partView)
}

/** @throws DomainError `conflict` when the name is taken, in whatever letter case */
export async function addPart(database: Database, buildId: string, input: NewPart): Promise<PartView> {
  return database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    await requireFreeName(tx, buildId, input.name)
    const position = sql`(select coalesce(max(position) + 1, 0) from ${parts} where build_id = ${buildId})`
    const [part] = await tx.insert(parts).values({ ...input, buildId, position }).returning()
    return partView(part!)
  })
}

/** Changes the fields that are given; `archived: false` brings a part back, with the steps it belonged to. */
export async function changePart(database: Database, buildId: string, partId: string, change: ChangePart): Promise<PartView> {
  return database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    const { archived, ...fields } = change
    if (fields.name !== undefined) await requireFreeName(tx, buildId, fields.name, partId)
    const [part] = await tx.update(parts)
      .set({ ...fields, updatedAt: new Date(), ...(archived === undefined ? {} : { archivedAt: archived ? sql`coalesce(${parts.archivedAt}, now())` : null }) })
      .where(and(eq(parts.id, partId), eq(parts.buildId, buildId))).returning()
    if (!part) throw notFound('That part')
    if (fields.name !== undefined || fields.aliases !== undefined) await refreshPassagesNaming(tx, { partId })
    return partView(part)
  })
}

export async function orderParts(database: Database, buildId: string, ids: string[]): Promise<void> {
  await database.transaction(async (tx) => {
    await lockPlan(tx, buildId)
    const standing = await tx.select({ id: parts.id, archived: isNotNull(parts.archivedAt).mapWith(Boolean) }).from(parts).where(eq(parts.buildId, buildId)).orderBy(asc(parts.position), asc(parts.name))
    const order = reorder(standing, ids)
    if (!order) throw new DomainError('conflict', 'Parts were added or archived in the meantime, so the new order was not kept. The list is shown as it stands now.')
    await writeOrder(tx, parts, buildId, order)
  })
}

async function requireFreeName(tx: Transaction, buildId: string, name: string, exceptId?: string): Promise<void> {
  const [taken] = await tx.select({ id: parts.id, name: parts.name, archivedAt: parts.archivedAt }).from(parts).where(and(eq(parts.buildId, buildId), sql`lower(${parts.name}) = lower(${name})`))
  if (!taken || taken.id === exceptId) return
  const message = `There is a part named “${taken.name}” already${taken.archivedAt ? ', among the archived ones' : ''}. Nothing was changed; choose another name.`
  throw new DomainError('conflict', message, { issues: [{ path: 'name', message: 'This name is taken' }] })
}

export function partView(part: Part): PartView {
  const { id, position, name, aliases, material, thicknessMm, quantity } = part
  return { id, position, name, aliases, material, thicknessMm, quantity, archived: part.archivedAt !== null }
}
