import { and, eq, inArray, lt, sql } from 'drizzle-orm'
import { captionTracks, clips, uploads } from '#server/database/schema'
import { deleteClip } from '#server/services/clips'
import { ownerOf } from '#server/services/objectKeys'
import type { WorkerContext } from './context'

/** An upload that nobody touched for so long is given up; until then it can be gone on with. */
export const KEEP_UPLOADS_DAYS = 7
const BATCH = 500

/**
 * Once a day: gives up uploads that stopped a week ago, and removes stored objects whose row is gone
 * (a job that never ran, a build that was deleted).
 */
export async function pruneStorage(context: WorkerContext): Promise<void> {
  await giveUpUploads(context)
  await removeOrphans(context)
}

async function giveUpUploads({ database }: WorkerContext): Promise<void> {
  const stale = await database.select({ id: clips.id }).from(clips).leftJoin(uploads, eq(uploads.clipId, clips.id))
    .where(and(eq(clips.state, 'uploading'), lt(sql`coalesce(${uploads.updatedAt}, ${clips.createdAt})`, sql`now() - make_interval(days => ${KEEP_UPLOADS_DAYS})`)))
  for (const { id } of stale) await deleteClip(database, id, null)
}

async function removeOrphans({ database, storage }: WorkerContext): Promise<void> {
  for (const prefix of ['clips/', 'captions/']) {
    let batch: string[] = []
    const flush = async () => {
      const owners = [...new Set(batch.map(key => ownerOf(key)!.id))]
      const table = prefix === 'clips/' ? clips : captionTracks
      const standing = owners.length ? await database.select({ id: table.id }).from(table).where(inArray(table.id, owners)) : []
      const kept = new Set(standing.map(row => row.id))
      const orphans = batch.filter(key => !kept.has(ownerOf(key)!.id))
      if (orphans.length) await storage.remove(orphans)
      batch = []
    }
    for await (const { key } of storage.list(prefix)) {
      if (ownerOf(key)) batch.push(key)
      if (batch.length >= BATCH) await flush()
    }
    await flush()
  }
}
