import { eq } from 'drizzle-orm'
import { z } from 'zod'
import { captionTracks, clips } from '#server/database/schema'
import { ownerOf } from '#server/services/objectKeys'
import type { WorkerContext } from './context'

const payloadSchema = z.object({
  prefix: z.string(),
  upload: z.object({ key: z.string(), uploadId: z.string() }).optional(),
})

/** Removes what a deleted clip or caption file left in the storage. Refuses while its row still stands. */
export async function removeObjects({ database, storage }: WorkerContext, payload: unknown): Promise<void> {
  const { prefix, upload } = payloadSchema.parse(payload)
  const owner = ownerOf(prefix)
  if (!owner) return
  const table = owner.kind === 'clip' ? clips : captionTracks
  const [standing] = await database.select({ id: table.id }).from(table).where(eq(table.id, owner.id))
  if (standing) return
  if (upload) await storage.abortUpload(upload.key, upload.uploadId)
  const keys: string[] = []
  for await (const { key } of storage.list(prefix)) keys.push(key)
  if (keys.length) await storage.remove(keys)
}
