import { DomainError } from '#shared/utils/errors'

/** What the SDK throws: service errors carry a name and a status, network errors a code. */
interface SdkError extends Error { code?: string, $metadata?: { httpStatusCode?: number } }

export function isMissing(error: unknown): boolean {
  const { name, $metadata } = error as SdkError
  return name === 'NoSuchKey' || name === 'NotFound' || name === 'NoSuchUpload' || (name !== 'NoSuchBucket' && $metadata?.httpStatusCode === 404)
}

function isAborted(error: unknown): boolean {
  return (error as SdkError).name === 'AbortError'
}

export function unreachable(cause: unknown): DomainError {
  return new DomainError('unavailable', 'The storage cannot be reached just now. Nothing was changed. Try again in a minute.', {}, { cause })
}

export function bucketMissing(cause: unknown): DomainError {
  return new DomainError('unavailable', 'The storage has no such bucket. Nothing was changed. Check S3_BUCKET.', {}, { cause })
}

/** Puts a failure of the storage into words. What is thrown on purpose, and cancelling, pass through. */
export function storageError(error: unknown): unknown {
  if (error instanceof DomainError || isAborted(error)) return error
  const { name, $metadata } = error as SdkError
  const status = $metadata?.httpStatusCode
  if (name === 'NoSuchUpload') return new DomainError('not-found', 'This upload is no longer open: it was finished, cancelled or left alone too long. Start it again.', {}, { cause: error })
  if (name === 'InvalidPart' || name === 'InvalidPartOrder' || name === 'EntityTooSmall') {
    return new DomainError('conflict', 'The parts in the storage are not the ones this upload sent. Nothing was changed. Send the missing parts and finish again.', {}, { cause: error })
  }
  if (name === 'EntityTooLarge') return new DomainError('too-large', 'This is larger than the storage takes. Nothing was stored.', {}, { cause: error })
  if (status === 507) return new DomainError('unavailable', 'The storage is full. Nothing was changed. Make room and try again.', {}, { cause: error })
  if (status === 401 || status === 403) return new DomainError('unavailable', 'The storage refused our keys. Nothing was changed. Check the S3 settings and the clock.', {}, { cause: error })
  if (name === 'NoSuchBucket') return bucketMissing(error)
  return unreachable(error)
}

/** Runs one piece of work against the storage with its failures put into words. */
export async function withStorage<T>(work: () => Promise<T>): Promise<T> {
  try {
    return await work()
  }
  catch (error) {
    throw storageError(error)
  }
}
