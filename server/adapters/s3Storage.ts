import { createHash } from 'node:crypto'
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateBucketCommand, CreateMultipartUploadCommand,
  DeleteObjectsCommand, GetObjectCommand, HeadBucketCommand, HeadObjectCommand, paginateListObjectsV2, paginateListParts,
  PutBucketCorsCommand, PutObjectCommand, S3Client, UploadPartCommand, type BucketLocationConstraint,
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { DomainError, notFound } from '#shared/utils/errors'
import { bucketMissing, isMissing, storageError, unreachable, withStorage } from './s3Errors'
import { fetchToFile, writeFile } from './s3Files'
import type { ObjectHead, Storage, UploadedPart } from './storage'

export interface S3StorageConfig {
  endpoint: string
  /** Where browsers reach the same storage, when that is another address. */
  publicEndpoint?: string
  region: string
  bucket: string
  accessKeyId: string
  secretAccessKey: string
}

const HOUR_S = 3600
/** The longest a presigned URL may live, by Signature Version 4. */
const MAX_EXPIRES_S = 7 * 24 * HOUR_S
const DEFAULT_GET_EXPIRES_S = 12 * HOUR_S
const DEFAULT_CACHE_S = HOUR_S
const REMOVE_BATCH = 1000
const PING_MS = 3000

// The version is pinned to one that runs on this Node, so its daily reminder to update tells nobody anything.
process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED ??= 'true'

function clientFor(config: S3StorageConfig, endpoint: string): S3Client {
  return new S3Client({
    endpoint,
    region: config.region,
    credentials: { accessKeyId: config.accessKeyId, secretAccessKey: config.secretAccessKey },
    forcePathStyle: true,
    // Otherwise the SDK signs the checksum of an empty body into presigned PUT URLs.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
    requestHandler: { connectionTimeout: 5000, requestTimeout: 300_000, throwOnRequestTimeout: true },
  })
}

export const bareEtag = (etag: string | undefined) => (etag ?? '').replace(/^"|"$/g, '')

/** How S3 names an object made of parts: the MD5 of their MD5s, and their number. */
function multipartEtag(parts: { etag: string }[]): string {
  const joined = Buffer.concat(parts.map(({ etag }) => Buffer.from(bareEtag(etag), 'hex')))
  return `${createHash('md5').update(joined).digest('hex')}-${parts.length}`
}

/** Object storage over the S3 protocol: our own local server or any other service. */
export function createS3Storage(config: S3StorageConfig): Storage & { close(): void } {
  const client = clientFor(config, config.endpoint)
  const publicClient = clientFor(config, config.publicEndpoint ?? config.endpoint)
  const Bucket = config.bucket

  async function bucketExists(): Promise<boolean> {
    try {
      await client.send(new HeadBucketCommand({ Bucket }))
      return true
    }
    catch (error) {
      if (isMissing(error)) return false
      throw error
    }
  }

  async function head(key: string): Promise<ObjectHead | null> {
    try {
      const found = await client.send(new HeadObjectCommand({ Bucket, Key: key }))
      return { sizeBytes: found.ContentLength ?? 0, etag: bareEtag(found.ETag), contentType: found.ContentType ?? null, lastModified: found.LastModified ?? new Date(0) }
    }
    catch (error) {
      if (isMissing(error)) return null
      throw storageError(error)
    }
  }

  async function open(key: string, bytes?: { start: number, end?: number }) {
    const Range = bytes && `bytes=${bytes.start}-${bytes.end ?? ''}`
    try {
      const { Body } = await client.send(new GetObjectCommand({ Bucket, Key: key, Range }))
      return Body as NodeJS.ReadableStream & { transformToByteArray(): Promise<Uint8Array> }
    }
    catch (error) {
      throw isMissing(error) ? notFound('The stored file') : storageError(error)
    }
  }

  return {
    ensureBucket: origins => withStorage(async () => {
      const LocationConstraint = config.region as BucketLocationConstraint
      if (!await bucketExists()) {
        await client.send(new CreateBucketCommand({ Bucket, ...(config.region === 'us-east-1' ? {} : { CreateBucketConfiguration: { LocationConstraint } }) }))
      }
      if (!origins.length) return
      const rule = { AllowedOrigins: origins, AllowedMethods: ['GET', 'HEAD', 'PUT'], AllowedHeaders: ['*'], ExposeHeaders: ['ETag', 'Content-Range', 'Content-Length', 'Accept-Ranges'], MaxAgeSeconds: HOUR_S }
      await client.send(new PutBucketCorsCommand({ Bucket, CORSConfiguration: { CORSRules: [rule] } }))
    }),

    head,
    read: open,
    readBuffer: async (key) => {
      const body = await open(key)
      return withStorage(async () => Buffer.from(await body.transformToByteArray()))
    },

    write: (key, body, contentType) => withStorage(async () => {
      await client.send(new PutObjectCommand({ Bucket, Key: key, Body: Buffer.from(body), ContentType: contentType }))
    }),
    writeFile: (key, path, contentType, signal) => withStorage(() => writeFile({ client, bucket: Bucket, key, path, contentType, signal })),
    fetchToFile: (key, path, signal) => fetchToFile({ client, bucket: Bucket, key, path, signal }),

    remove: keys => withStorage(async () => {
      for (let at = 0; at < keys.length; at += REMOVE_BATCH) {
        const Objects = keys.slice(at, at + REMOVE_BATCH).map(Key => ({ Key }))
        const { Errors } = await client.send(new DeleteObjectsCommand({ Bucket, Delete: { Objects, Quiet: true } }))
        if (Errors?.length) throw new DomainError('unavailable', `${Errors.length} stored files could not be removed. Try again in a minute.`)
      }
    }),

    async* list(prefix) {
      try {
        for await (const page of paginateListObjectsV2({ client }, { Bucket, Prefix: prefix })) {
          for (const { Key, Size } of page.Contents ?? []) yield { key: Key!, sizeBytes: Size ?? 0 }
        }
      }
      catch (error) {
        throw storageError(error)
      }
    },

    beginUpload: (key, contentType) => withStorage(async () => {
      const { UploadId } = await client.send(new CreateMultipartUploadCommand({ Bucket, Key: key, ContentType: contentType }))
      return UploadId!
    }),

    async listParts(key, uploadId) {
      const parts: UploadedPart[] = []
      try {
        for await (const page of paginateListParts({ client }, { Bucket, Key: key, UploadId: uploadId })) {
          for (const part of page.Parts ?? []) parts.push({ partNumber: part.PartNumber!, sizeBytes: part.Size ?? 0, etag: bareEtag(part.ETag) })
        }
      }
      catch (error) {
        if (isMissing(error)) return null
        throw storageError(error)
      }
      return parts
    },

    async completeUpload(key, uploadId, parts) {
      const Parts = parts.map(({ partNumber, etag }) => ({ PartNumber: partNumber, ETag: `"${bareEtag(etag)}"` }))
      let failure: unknown = null
      try {
        await client.send(new CompleteMultipartUploadCommand({ Bucket, Key: key, UploadId: uploadId, MultipartUpload: { Parts } }))
      }
      catch (error) {
        failure = error
      }
      // The answer to this or an earlier attempt may have been lost while the object was made.
      const standing = await head(key).catch((error: unknown) => {
        throw failure ? storageError(failure) : error
      })
      if (standing && (!failure || standing.etag === multipartEtag(parts))) return standing
      throw failure ? storageError(failure) : notFound('The uploaded file')
    },

    abortUpload: (key, uploadId) => withStorage(async () => {
      await client.send(new AbortMultipartUploadCommand({ Bucket, Key: key, UploadId: uploadId })).catch((error: unknown) => {
        if (!isMissing(error)) throw error
      })
    }),

    presignPart: (key, uploadId, partNumber, expiresInSeconds) =>
      getSignedUrl(publicClient, new UploadPartCommand({ Bucket, Key: key, UploadId: uploadId, PartNumber: partNumber }), { expiresIn: Math.min(expiresInSeconds, MAX_EXPIRES_S) }),

    presignGet: (key, { expiresInSeconds = DEFAULT_GET_EXPIRES_S, contentType, downloadName, cacheSeconds = DEFAULT_CACHE_S } = {}) => {
      const signingDate = new Date(Math.floor(Date.now() / (HOUR_S * 1000)) * HOUR_S * 1000)
      const command = new GetObjectCommand({
        Bucket,
        Key: key,
        ResponseContentType: contentType,
        ResponseContentDisposition: downloadName === undefined ? undefined : attachment(downloadName),
        ResponseCacheControl: cacheSeconds > 0 ? `private, max-age=${cacheSeconds}` : 'no-store',
      })
      return getSignedUrl(publicClient, command, { signingDate, expiresIn: Math.min(expiresInSeconds + HOUR_S, MAX_EXPIRES_S) })
    },

    ping: () => withStorage(async () => {
      const abortSignal = AbortSignal.timeout(PING_MS)
      await client.send(new HeadBucketCommand({ Bucket }), { abortSignal }).catch((error: unknown) => {
        throw abortSignal.aborted ? unreachable(error) : isMissing(error) ? bucketMissing(error) : error
      })
    }),

    close: () => {
      client.destroy()
      publicClient.destroy()
    },
  }
}

/** RFC 6266: a plain name for old clients, the true one beside it. */
function attachment(name: string): string {
  const plain = name.normalize('NFKD').replace(/\p{M}/gu, '').replace(/[^\x20-\x7E]/g, '_').replace(/["\\]/g, '_')
  const full = encodeURIComponent(name).replace(/[!'()*]/g, c => `%${c.charCodeAt(0).toString(16).toUpperCase()}`)
  return `attachment; filename="${plain}"; filename*=UTF-8''${full}`
}
