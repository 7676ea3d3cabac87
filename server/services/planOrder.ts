import { eq, sql } from 'drizzle-orm'
import { notFound } from '#shared/utils/errors'
import type { Transaction } from '../database/client'
import { builds, type parts, type steps } from '../database/schema'

/**
 * Holds a build's plan still until the transaction ends: numbers, names and places are decided by what
 * stands already, so two people who add at once take turns.
 */
export async function lockPlan(tx: Transaction, buildId: string): Promise<void> {
  const locked = await tx.select({ id: builds.id }).from(builds).where(eq(builds.id, buildId)).for('update')
  if (!locked.length) throw notFound('That build')
}

/** Writes the places of a build's steps or parts: `ids` in order, from 0. Rows that are in place already are not touched. */
export async function writeOrder(tx: Transaction, table: typeof steps | typeof parts, buildId: string, ids: string[]): Promise<void> {
  if (!ids.length) return
  await tx.execute(sql`
    update ${table} t set position = o.place - 1
    from unnest(${sql.param(ids)}::uuid[]) with ordinality as o(id, place)
    where t.id = o.id and t.build_id = ${buildId} and t.position <> o.place - 1`)
}
