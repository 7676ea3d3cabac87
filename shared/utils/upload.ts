import { DomainError } from './errors'

const MIB = 1024 * 1024
/** 50 GB as disks are sold: an hour of 4K at 100 Mb/s is 45 GB. */
export const MAX_CLIP_BYTES = 50_000_000_000
const SMALLEST_PART = 8 * MIB
/** S3 allows 10,000 parts; far fewer keep the list of parts and the work per part small. */
const MOST_PARTS = 2000

export interface PartPlan { partSizeBytes: number, partCount: number }

/**
 * How a file is cut for uploading: a function of its size alone, so that page, site and worker agree
 * without telling each other. 8 MiB doubled until there are at most 2000 parts.
 *
 * @throws DomainError 'unreadable' for an empty file, 'too-large' above 50 GB
 */
export function planParts(sizeBytes: number): PartPlan {
  if (!Number.isSafeInteger(sizeBytes) || sizeBytes < 0) throw new DomainError('bad-input', 'The size of the file is not a whole number of bytes. Nothing was uploaded.')
  if (sizeBytes === 0) throw new DomainError('unreadable', 'The file is empty: it holds no bytes at all, so nothing was uploaded. Copy it from the camera or phone again.')
  if (sizeBytes > MAX_CLIP_BYTES) throw new DomainError('too-large', `The file has ${(sizeBytes / 1e9).toFixed(1)} GB; clips may have 50 GB at most. Nothing was uploaded. Cut it in two and upload both.`)
  let partSizeBytes = SMALLEST_PART
  while (sizeBytes > partSizeBytes * MOST_PARTS) partSizeBytes *= 2
  return { partSizeBytes, partCount: Math.ceil(sizeBytes / partSizeBytes) }
}

/** First byte and the byte after the last of part `partNumber` (from 1). */
export function partRange(sizeBytes: number, partSizeBytes: number, partNumber: number): { start: number, end: number } {
  const start = (partNumber - 1) * partSizeBytes
  return { start, end: Math.min(sizeBytes, start + partSizeBytes) }
}

/** How much of a file goes into its fingerprint: 64 kB at 16 places spread evenly, the first and last included. */
export const FINGERPRINT_SAMPLE_BYTES = 64 * 1024
const FINGERPRINT_SAMPLES = 16

/** The stretches of a file that its fingerprint is made of; small files whole. */
export function fingerprintRanges(sizeBytes: number): { start: number, end: number }[] {
  if (sizeBytes <= FINGERPRINT_SAMPLE_BYTES * FINGERPRINT_SAMPLES) return sizeBytes ? [{ start: 0, end: sizeBytes }] : []
  const last = sizeBytes - FINGERPRINT_SAMPLE_BYTES
  return Array.from({ length: FINGERPRINT_SAMPLES }, (_, i) => {
    const start = Math.floor(last * i / (FINGERPRINT_SAMPLES - 1))
    return { start, end: start + FINGERPRINT_SAMPLE_BYTES }
  })
}

/** '1.4 GB', '820 kB': decimal units, as disks and phones count. */
export function formatBytes(bytes: number): string {
  if (bytes < 1000) return `${bytes} ${bytes === 1 ? 'byte' : 'bytes'}`
  const units = ['kB', 'MB', 'GB', 'TB']
  let value = bytes / 1000
  let unit = 0
  while (value >= 999.5 && unit < units.length - 1) {
    value /= 1000
    unit++
  }
  return `${value < 10 ? value.toFixed(1) : Math.round(value)} ${units[unit]}`
}
