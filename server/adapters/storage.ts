/**
 * Object storage as Ribband needs it: any S3 service. One interface so that tests can hold every
 * implementation to the same contract. Keys are made by us (never from a user's file name).
 */
export interface ObjectHead { sizeBytes: number, etag: string, contentType: string | null, lastModified: Date }
export interface UploadedPart { partNumber: number, sizeBytes: number, etag: string }

export interface Storage {
  /** Creates the bucket if it is missing and sets CORS for browsers at `origins`. */
  ensureBucket(origins: string[]): Promise<void>
  head(key: string): Promise<ObjectHead | null>
  /** Streams an object, or `bytes` (inclusive) of it. Throws DomainError `not-found`. */
  read(key: string, bytes?: { start: number, end?: number }): Promise<NodeJS.ReadableStream>
  readBuffer(key: string): Promise<Buffer>
  /** Writes an object from memory or, for files of any size, from a local path (multipart). */
  write(key: string, body: Buffer | string, contentType: string): Promise<void>
  writeFile(key: string, path: string, contentType: string, signal?: AbortSignal): Promise<void>
  /** Copies an object to a local file without holding it in memory. */
  fetchToFile(key: string, path: string, signal?: AbortSignal): Promise<void>
  remove(keys: string[]): Promise<void>
  list(prefix: string): AsyncIterable<{ key: string, sizeBytes: number }>
  beginUpload(key: string, contentType: string): Promise<string>
  listParts(key: string, uploadId: string): Promise<UploadedPart[] | null>
  /** Parts in ascending order. Idempotent: succeeds when the object already stands with the right size. */
  completeUpload(key: string, uploadId: string, parts: { partNumber: number, etag: string }[]): Promise<ObjectHead>
  abortUpload(key: string, uploadId: string): Promise<void>
  /** A URL at the public endpoint for one PUT of one part. */
  presignPart(key: string, uploadId: string, partNumber: number, expiresInSeconds: number): Promise<string>
  /**
   * A GET URL whose time is rounded down so that one object keeps one URL for a while (browser cache).
   * Valid at least `expiresInSeconds` (12 hours). Browsers may keep the bytes for `cacheSeconds` (one hour; 0 for never).
   */
  presignGet(key: string, options?: { expiresInSeconds?: number, contentType?: string, downloadName?: string, cacheSeconds?: number }): Promise<string>
  ping(): Promise<void>
}
