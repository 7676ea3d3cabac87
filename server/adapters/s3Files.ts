import { createWriteStream } from 'node:fs'
import { open, rm, stat, type FileHandle } from 'node:fs/promises'
import type { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateMultipartUploadCommand, GetObjectCommand,
  PutObjectCommand, UploadPartCommand, type S3Client,
} from '@aws-sdk/client-s3'
import { notFound } from '#shared/utils/errors'
import { isMissing, storageError } from './s3Errors'

/** Moving whole files to and from the storage: memory stays at a few parts, whatever the size. */
const PART_BYTES = 16 * 1024 ** 2
const MAX_PARTS = 10_000
const IN_FLIGHT = 2
const FETCH_TRIES = 4

interface Transfer { client: S3Client, bucket: string, key: string, path: string, signal?: AbortSignal }

async function readSlice(handle: FileHandle, start: number, length: number): Promise<Buffer> {
  const buffer = Buffer.allocUnsafe(length)
  let filled = 0
  while (filled < length) {
    const { bytesRead } = await handle.read(buffer, filled, length - filled, start + filled)
    if (bytesRead === 0) throw new Error('The file became shorter while it was being stored.')
    filled += bytesRead
  }
  return buffer
}

export async function writeFile(transfer: Transfer & { contentType: string }): Promise<void> {
  const { client, bucket: Bucket, key: Key, path, contentType: ContentType, signal: abortSignal } = transfer
  const handle = await open(path, 'r')
  try {
    const { size } = await handle.stat()
    if (size <= PART_BYTES) {
      await client.send(new PutObjectCommand({ Bucket, Key, ContentType, Body: await readSlice(handle, 0, size) }), { abortSignal })
      return
    }
    const { UploadId } = await client.send(new CreateMultipartUploadCommand({ Bucket, Key, ContentType }), { abortSignal })
    try {
      const Parts = await sendParts(transfer, handle, size, UploadId!)
      await client.send(new CompleteMultipartUploadCommand({ Bucket, Key, UploadId, MultipartUpload: { Parts } }), { abortSignal })
    }
    catch (error) {
      await client.send(new AbortMultipartUploadCommand({ Bucket, Key, UploadId })).catch(() => undefined)
      throw error
    }
  }
  finally {
    await handle.close()
  }
}

async function sendParts(transfer: Transfer, handle: FileHandle, size: number, UploadId: string) {
  const { client, bucket: Bucket, key: Key, signal: abortSignal } = transfer
  const partBytes = Math.max(PART_BYTES, Math.ceil(size / MAX_PARTS))
  const parts: { PartNumber: number, ETag: string }[] = []
  const count = Math.ceil(size / partBytes)
  let next = 1
  const sender = async () => {
    while (next <= count) {
      const PartNumber = next++
      const start = (PartNumber - 1) * partBytes
      const Body = await readSlice(handle, start, Math.min(partBytes, size - start))
      const { ETag } = await client.send(new UploadPartCommand({ Bucket, Key, UploadId, PartNumber, Body }), { abortSignal })
      parts.push({ PartNumber, ETag: ETag! })
    }
  }
  const senders = Array.from({ length: IN_FLIGHT }, sender)
  try {
    await Promise.all(senders)
  }
  catch (error) {
    // The other sender still uses the file: let it come to its end before the file is closed.
    next = count + 1
    await Promise.allSettled(senders)
    throw error
  }
  return parts.sort((a, b) => a.PartNumber - b.PartNumber)
}

/** A connection that breaks midway is taken up where it stopped, as long as the object is the same. */
export async function fetchToFile(transfer: Transfer): Promise<void> {
  const { client, bucket: Bucket, key: Key, path, signal: abortSignal } = transfer
  await rm(path, { force: true })
  let etag: string | undefined
  for (let attempt = 1; ; attempt++) {
    const have = attempt === 1 ? 0 : await stat(path).then(({ size }) => size, () => 0)
    try {
      const { Body, ETag } = await client.send(new GetObjectCommand({ Bucket, Key, ...(have ? { Range: `bytes=${have}-`, IfMatch: etag } : {}) }), { abortSignal })
      etag = ETag
      await pipeline(Body as Readable, createWriteStream(path, { flags: have ? 'a' : 'w' }), { signal: abortSignal })
      return
    }
    catch (error) {
      if (isMissing(error)) throw notFound('The stored file')
      const changed = (error as Error).name === 'PreconditionFailed'
      const complete = (error as Error).name === 'InvalidRange' && have > 0
      if (complete) return
      if (changed) await rm(path, { force: true })
      if (abortSignal?.aborted || attempt >= FETCH_TRIES || isLocalFailure(error)) throw isLocalFailure(error) ? error : storageError(error)
    }
  }
}

/** A full or read-only disk on this side is not the storage's fault. */
function isLocalFailure(error: unknown): boolean {
  return ['ENOSPC', 'EACCES', 'ENOENT', 'EROFS', 'EDQUOT', 'EISDIR'].includes((error as NodeJS.ErrnoException).code ?? '')
}
