import type { Extent } from './blobs'

/** Headers that are kept with an object and given back with it. */
export const KEPT_HEADERS = ['content-type', 'cache-control', 'content-disposition', 'content-encoding', 'content-language', 'expires'] as const

export interface Attributes {
  headers: Record<string, string>
  /** `x-amz-meta-*`, without the prefix. */
  metadata: Record<string, string>
}

/** One object: where its bytes are and what is told about it. Kept as one JSON file. */
export interface ObjectRecord extends Attributes {
  key: string
  sizeBytes: number
  etag: string
  lastModified: string
  checksums: Record<string, string>
  extents: Extent[]
  /** The multipart upload that made it, so that a repeated Complete finds its own result. */
  uploadId?: string
}

export interface PartRecord extends Extent {
  partNumber: number
  etag: string
  lastModified: string
  checksums: Record<string, string>
}

export interface UploadRecord extends Attributes {
  uploadId: string
  key: string
  initiated: string
}

export interface Upload extends UploadRecord {
  parts: Map<number, PartRecord>
  touchedMs: number
}

export interface CorsRule {
  allowedOrigins: string[]
  allowedMethods: string[]
  allowedHeaders: string[]
  exposeHeaders: string[]
  maxAgeSeconds: number | null
}

export interface BucketRecord { name: string, created: string, cors: CorsRule[] }
