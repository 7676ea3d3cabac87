import { createHash } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { basename } from 'node:path'
import type { Storage } from '#server/adapters/storage'
import type { Database } from '#server/database/client'
import { beginUpload, completeUpload, partAddresses } from '#server/services/uploads'
import type { CompleteUpload } from '#shared/schemas/clips'
import { fingerprintRanges, partRange } from '#shared/utils/upload'

export const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex')

/** The fingerprint that the page works out, for bytes in memory. */
export function fingerprintOf(bytes: Buffer): string {
  const hash = createHash('sha256').update(`${bytes.length}\n`)
  for (const { start, end } of fingerprintRanges(bytes.length)) hash.update(bytes.subarray(start, end))
  return hash.digest('hex')
}

/** PUTs one part to its presigned address, as a browser does. Answers the ETag. */
export async function putPart(url: string, bytes: Uint8Array): Promise<string> {
  const answer = await fetch(url, { method: 'PUT', body: bytes as BodyInit })
  if (!answer.ok) throw new Error(`The storage answered ${answer.status}: ${await answer.text()}`)
  return answer.headers.get('etag')!
}

/** Sends all (or only some) parts of an upload; answers what to complete it with. */
export async function sendParts(database: Database, storage: Storage, clipId: string, bytes: Buffer, plan: { partSizeBytes: number, partCount: number }, only = (_n: number) => true): Promise<CompleteUpload['parts']> {
  const numbers = Array.from({ length: plan.partCount }, (_, i) => i + 1).filter(only)
  const { parts } = await partAddresses(database, storage, clipId, numbers)
  const sent: CompleteUpload['parts'] = []
  for (const { partNumber, url } of parts) {
    const { start, end } = partRange(bytes.length, plan.partSizeBytes, partNumber)
    const part = bytes.subarray(start, end)
    sent.push({ partNumber, etag: await putPart(url, part), sha256: sha256(part) })
  }
  return sent
}

/** Uploads a file the way the page does, from beginning to end. Answers the clip's id. */
export async function uploadFile(database: Database, storage: Storage, sessionId: string, userId: string, file: string | { name: string, bytes: Buffer }): Promise<string> {
  const { name, bytes } = typeof file === 'string' ? { name: basename(file), bytes: await readFile(file) } : file
  const begun = await beginUpload(database, storage, sessionId, userId, { name, sizeBytes: bytes.length, contentType: 'video/mp4', fingerprint: fingerprintOf(bytes) })
  if (begun.kind !== 'upload') throw new Error('The file is in the build already.')
  const parts = await sendParts(database, storage, begun.clipId, bytes, begun)
  await completeUpload(database, storage, begun.clipId, userId, { parts })
  return begun.clipId
}
