import type { ClipReference, PartAddresses, UploadBegun } from '#shared/types/uploads'

export type UploadState
  = | 'waiting' // in line behind other files
    | 'checking' // fingerprint, or compared with a clip that looks the same
    | 'sending'
    | 'offline' // goes on by itself when the line is back
    | 'finishing'
    | 'paused'
    | 'done'
    | 'double' // the build has it already
    | 'failed'

/** What the page shows of one file. */
export interface UploadProgress {
  state: UploadState
  clipId: string | null
  sentBytes: number
  bytesPerSecond: number | null
  secondsLeft: number | null
  /** What went wrong and what was kept, or what is being waited for. */
  message: string
  double: ClipReference | null
}

/** The outside world of an upload, so that it can be tried without a browser. */
export interface UploadOutside {
  begin: (input: { name: string, sizeBytes: number, contentType: string, fingerprint: string, contentHash?: string }) => Promise<UploadBegun>
  addresses: (clipId: string, partNumbers: number[]) => Promise<PartAddresses>
  complete: (clipId: string, parts: { partNumber: number, etag: string, sha256: string }[]) => Promise<unknown>
  put: (url: string, piece: Blob, options: { signal: AbortSignal, onSent: (bytes: number) => void }) => Promise<string>
  fingerprint: (file: Blob) => Promise<string>
  hash: (piece: Blob, signal: AbortSignal) => Promise<string>
  combine: (hashes: string[]) => Promise<string>
  online: () => boolean
  /** Resolves when the browser says the line is back, or after a while to try anyway. */
  whenOnline: (signal: AbortSignal) => Promise<void>
  sleep: (ms: number, signal: AbortSignal) => Promise<void>
  now: () => number
}

/** What a failed request looks like to an upload: the site's ApiProblem. */
export interface RequestProblem { status: number, code: string, message: string, data: Record<string, unknown> }
