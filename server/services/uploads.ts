import { and, eq, ne } from 'drizzle-orm'
import type { BeginUpload, CompleteUpload } from '#shared/schemas/clips'
import type { PartAddresses, UploadBegun } from '#shared/types/uploads'
import { DomainError } from '#shared/utils/errors'
import { formatBytes, partRange, planParts } from '#shared/utils/upload'
import type { Storage, UploadedPart } from '../adapters/storage'
import type { Database } from '../database/client'
import { type Clip, clips, sessions, type Upload, uploads } from '../database/schema'
import { enqueueTask } from './clipTasks'
import { combineHashes } from './contentHash'
import { conflictWith, duplicateOf, removeDouble } from './duplicates'
import { announce } from './live'
import { originalKey } from './objectKeys'
import { pairWaitingTracks } from './captions'

/** Long enough for one part over a slow line, short enough that a leaked address is soon worth nothing. */
const PART_ADDRESS_SECONDS = 3600

/**
 * Begins the upload of one file, or finds it again after a reload or on another device.
 *
 * @throws DomainError 'unreadable' (empty), 'too-large', or 'conflict' with where the same content is
 */
export async function beginUpload(database: Database, storage: Storage, sessionId: string, userId: string, input: BeginUpload): Promise<UploadBegun> {
  const plan = planParts(input.sizeBytes)
  const [session] = await database.select({ id: sessions.id, buildId: sessions.buildId }).from(sessions).where(eq(sessions.id, sessionId))
  if (!session) throw new DomainError('not-found', 'That session was not found. It may have been removed.')

  const double = input.contentHash ? await duplicateOf(database, session.buildId, input.contentHash) : null
  if (double) throw conflictWith(double, input.name)
  if (!input.contentHash) {
    const [candidate] = await database.select().from(clips)
      .where(and(eq(clips.buildId, session.buildId), eq(clips.fingerprint, input.fingerprint), eq(clips.sizeBytes, input.sizeBytes), ne(clips.state, 'uploading'))).limit(1)
    if (candidate) return { kind: 'hash-first', ...plan, candidate: { clipId: candidate.id, sessionId: candidate.sessionId, name: candidate.name } }
  }
  const clip = await findOrAddClip(database, session, userId, input)
  if (clip.sessionId !== sessionId) {
    throw new DomainError('conflict', `${clip.name} is being uploaded to another session of this build. Go on with it there, or cancel it there first. Nothing was uploaded here.`, { clipId: clip.id, sessionId: clip.sessionId, name: clip.name })
  }
  const { upload, parts } = await openUpload(database, storage, clip, plan.partSizeBytes)
  return { kind: 'upload', clipId: clip.id, partSizeBytes: upload.partSizeBytes, partCount: plan.partCount, uploaded: parts }
}

async function findOrAddClip(database: Database, session: { id: string, buildId: string }, userId: string, input: BeginUpload): Promise<Clip> {
  const unfinished = and(eq(clips.buildId, session.buildId), eq(clips.fingerprint, input.fingerprint), eq(clips.state, 'uploading'))
  const [found] = await database.select().from(clips).where(unfinished)
  if (found) return found
  return database.transaction(async (tx) => {
    const id = crypto.randomUUID()
    const [added] = await tx.insert(clips).values({
      id, sessionId: session.id, buildId: session.buildId, name: input.name, objectKey: originalKey(id), sizeBytes: input.sizeBytes,
      contentType: input.contentType || 'application/octet-stream', fingerprint: input.fingerprint, uploadedBy: userId,
    }).onConflictDoNothing().returning()
    if (!added) {
      const [other] = await tx.select().from(clips).where(unfinished)
      if (other) return other
      throw new DomainError('conflict', `${input.name} was begun and finished on another page just now. Reload to see it.`)
    }
    await pairWaitingTracks(tx, session.id)
    await announce(tx, { sessionId: session.id, kind: 'clip', id, by: userId })
    return added
  })
}

/** The storage's upload of a clip: the one begun earlier with its parts, or a new one when it is gone. */
async function openUpload(database: Database, storage: Storage, clip: Clip, partSizeBytes: number): Promise<{ upload: Upload, parts: UploadedPart[] }> {
  const [known] = await database.select().from(uploads).where(eq(uploads.clipId, clip.id))
  if (known) {
    const parts = await storage.listParts(clip.objectKey, known.uploadId)
    if (parts) {
      await database.update(uploads).set({ updatedAt: new Date() }).where(eq(uploads.clipId, clip.id))
      return { upload: known, parts: parts.filter(part => partFits(clip, known, part)) }
    }
  }
  const uploadId = await storage.beginUpload(clip.objectKey, 'application/octet-stream')
  const fresh = { uploadId, partSizeBytes, updatedAt: new Date() }
  const [upload] = await database.insert(uploads).values({ clipId: clip.id, ...fresh })
    .onConflictDoUpdate({ target: uploads.clipId, set: fresh, ...(known ? { setWhere: eq(uploads.uploadId, known.uploadId) } : { setWhere: eq(uploads.uploadId, '') }) }).returning()
  if (upload) return { upload, parts: [] }
  // Another page opened it in the same moment: use that one, leave no second one behind.
  await storage.abortUpload(clip.objectKey, uploadId)
  const [other] = await database.select().from(uploads).where(eq(uploads.clipId, clip.id))
  if (!other) throw gone()
  return { upload: other, parts: await storage.listParts(clip.objectKey, other.uploadId) ?? [] }
}

function partFits(clip: Clip, upload: Upload, part: UploadedPart): boolean {
  const { start, end } = partRange(clip.sizeBytes, upload.partSizeBytes, part.partNumber)
  return end > start && part.sizeBytes === end - start
}

/** Addresses to which the page sends parts, each for one part and for an hour. */
export async function partAddresses(database: Database, storage: Storage, clipId: string, partNumbers: number[]): Promise<PartAddresses> {
  const { clip, upload } = await requireUpload(database, clipId)
  const partCount = Math.ceil(clip.sizeBytes / upload.partSizeBytes)
  const wrong = partNumbers.find(number => number > partCount)
  if (wrong) throw new DomainError('bad-input', `There is no part ${wrong}: the file has ${partCount}. Nothing was changed.`)
  await database.update(uploads).set({ updatedAt: new Date() }).where(eq(uploads.clipId, clipId))
  const parts = await Promise.all(partNumbers.map(async partNumber => ({ partNumber, url: await storage.presignPart(clip.objectKey, upload.uploadId, partNumber, PART_ADDRESS_SECONDS) })))
  return { parts }
}

/**
 * Ends an upload: all parts must stand in the storage as the page says it sent them. The clip, its checksum
 * and the job that probes it are written together. Asking again after a lost answer does no harm.
 *
 * @throws DomainError 'conflict' with `missing` parts, or with the clip that has the same content (the new one is removed)
 */
export async function completeUpload(database: Database, storage: Storage, clipId: string, userId: string, input: CompleteUpload): Promise<{ clipId: string }> {
  const parts = [...input.parts].sort((a, b) => a.partNumber - b.partNumber)
  const contentHash = combineHashes(parts.map(part => part.sha256))
  const [standing] = await database.select().from(clips).where(eq(clips.id, clipId))
  if (standing && standing.state !== 'uploading') {
    if (standing.contentHash === contentHash) return { clipId }
    throw new DomainError('conflict', 'This clip was uploaded already, with other content. It is kept as it is.')
  }
  const { clip, upload } = await requireUpload(database, clipId)
  const double = await duplicateOf(database, clip.buildId, contentHash)
  if (double) {
    await removeDouble(database, clip, double, userId)
    throw conflictWith(double, clip.name)
  }
  const stored = await storage.listParts(clip.objectKey, upload.uploadId)
  if (stored) checkParts(clip, upload, stored, parts)
  const head = await storage.completeUpload(clip.objectKey, upload.uploadId, parts)
  if (head.sizeBytes !== clip.sizeBytes) throw new DomainError('conflict', `The storage holds ${formatBytes(head.sizeBytes)} of ${formatBytes(clip.sizeBytes)}. Pick the file again to send what is missing.`)
  await keepUploaded(database, clip, contentHash, userId)
  return { clipId }
}

/** @throws DomainError 'conflict' naming the parts that are missing or are not what the page sent */
function checkParts(clip: Clip, upload: Upload, stored: UploadedPart[], claimed: CompleteUpload['parts']): void {
  const partCount = Math.ceil(clip.sizeBytes / upload.partSizeBytes)
  const bare = (etag: string) => etag.replace(/^(?:W\/)?"|"$/g, '').toLowerCase()
  const missing: number[] = []
  for (let number = 1; number <= partCount; number++) {
    const there = stored.find(part => part.partNumber === number)
    const said = claimed.find(part => part.partNumber === number)
    if (!there || !said || !partFits(clip, upload, there) || bare(there.etag) !== bare(said.etag)) missing.push(number)
  }
  if (missing.length) {
    throw new DomainError('conflict', `${missing.length} of ${partCount} parts of ${clip.name} did not arrive whole. The others are kept; sending those again finishes it.`, { missing: missing.slice(0, 100) })
  }
  if (claimed.length !== partCount) throw new DomainError('bad-input', `The file has ${partCount} parts, not ${claimed.length}. What was sent is kept.`)
}

async function keepUploaded(database: Database, clip: Clip, contentHash: string, userId: string): Promise<void> {
  try {
    await database.transaction(async (tx) => {
      const [kept] = await tx.update(clips).set({ state: 'waiting', contentHash }).where(and(eq(clips.id, clip.id), eq(clips.state, 'uploading'))).returning({ id: clips.id })
      if (!kept) return
      await tx.delete(uploads).where(eq(uploads.clipId, clip.id))
      await enqueueTask(tx, clip, 'probe-clip')
      await announce(tx, { sessionId: clip.sessionId, kind: 'clip', id: clip.id, by: userId })
    })
  }
  catch (error) {
    // The same file ended on another page in the same moment: the unique index let one through.
    const double = await duplicateOf(database, clip.buildId, contentHash)
    if (!double || double.id === clip.id) throw error
    await removeDouble(database, clip, double, userId)
    throw conflictWith(double, clip.name)
  }
}

async function requireUpload(database: Database, clipId: string): Promise<{ clip: Clip, upload: Upload }> {
  const [row] = await database.select({ clip: clips, upload: uploads }).from(clips).innerJoin(uploads, eq(uploads.clipId, clips.id)).where(and(eq(clips.id, clipId), eq(clips.state, 'uploading')))
  if (!row) throw gone()
  return row
}

function gone(): DomainError {
  return new DomainError('conflict', 'This upload is not open any more: it was finished or cancelled on another page. Reload the session to see how it stands.')
}
