import { z } from 'zod'

const sha256 = z.string().regex(/^[0-9a-f]{64}$/, 'A checksum must be 64 hexadecimal digits')
const partNumber = z.number().int().min(1).max(10_000)

export const beginUploadSchema = z.object({
  name: z.string().trim().min(1, 'The file has no name').max(255, 'The file name is longer than 255 characters: shorten it'),
  sizeBytes: z.number().int().min(0),
  contentType: z.string().trim().max(120).default(''),
  /** SHA-256 over size and samples. */
  fingerprint: sha256,
  /** SHA-256 over the parts' SHA-256s; sent when the site asked to tell a double apart. */
  contentHash: sha256.optional(),
})
export type BeginUpload = z.infer<typeof beginUploadSchema>

export const partAddressesSchema = z.object({ partNumbers: z.array(partNumber).min(1).max(100, 'Ask for at most 100 parts at a time') })

export const completeUploadSchema = z.object({
  parts: z.array(z.object({ partNumber, etag: z.string().trim().min(1).max(200), sha256 })).min(1).max(10_000),
})
export type CompleteUpload = z.infer<typeof completeUploadSchema>

/** Places on the session's clock: within 10 days either way, whole milliseconds. */
const offsetMs = z.number().int('Give the place in whole milliseconds').min(-864_000_000, 'That is more than 10 days away').max(864_000_000, 'That is more than 10 days away')

export const clipChangesSchema = z.object({
  camera: z.string().trim().max(60, 'Keep the camera’s name under 60 characters').optional(),
  /** Null gives the clip back to the program, which places it by its recorded-at time. */
  offsetMs: offsetMs.nullable().optional(),
  /** Null goes back to the time found in the file or its name. */
  recordedAt: z.iso.datetime({ offset: true, error: 'Enter the day and time of the recording' }).nullable().optional(),
})
export type ClipChanges = z.infer<typeof clipChangesSchema>
