import { createHash } from 'node:crypto'
import { open } from 'node:fs/promises'
import { partRange, planParts } from '#shared/utils/upload'

/** SHA-256 over the parts' SHA-256s (their bytes, in order), hex. Page and worker reckon the same way. */
export function combineHashes(partHashes: readonly string[]): string {
  const whole = createHash('sha256')
  for (const hash of partHashes) whole.update(Buffer.from(hash, 'hex'))
  return whole.digest('hex')
}

/** The content hash of a local file, read in small pieces. */
export async function hashFile(path: string, sizeBytes: number, signal?: AbortSignal): Promise<string> {
  const { partSizeBytes, partCount } = planParts(sizeBytes)
  const buffer = Buffer.allocUnsafe(1024 * 1024)
  const file = await open(path)
  try {
    const hashes: string[] = []
    for (let number = 1; number <= partCount; number++) {
      const { start, end } = partRange(sizeBytes, partSizeBytes, number)
      const part = createHash('sha256')
      for (let at = start; at < end;) {
        signal?.throwIfAborted()
        const { bytesRead } = await file.read(buffer, 0, Math.min(buffer.length, end - at), at)
        if (!bytesRead) break
        part.update(buffer.subarray(0, bytesRead))
        at += bytesRead
      }
      hashes.push(part.digest('hex'))
    }
    return combineHashes(hashes)
  }
  finally {
    await file.close()
  }
}
