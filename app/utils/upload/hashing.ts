import { fingerprintRanges } from '#shared/utils/upload'

/*
 * crypto.subtle hashes off the main thread, but browsers offer it only over https and on localhost.
 * Elsewhere (a phone on the shop's own network) the same sums come from WebAssembly, in steps small enough
 * that the page stays alive.
 */
const STEP_BYTES = 1024 * 1024

/** SHA-256 of a piece of a file, hex. Holds that piece in memory and no more. */
export async function sha256Of(piece: Blob, signal?: AbortSignal): Promise<string> {
  if (globalThis.crypto?.subtle) return toHex(new Uint8Array(await crypto.subtle.digest('SHA-256', await piece.arrayBuffer())))
  const { createSHA256 } = await import('hash-wasm')
  const hasher = await createSHA256()
  for (let at = 0; at < piece.size; at += STEP_BYTES) {
    signal?.throwIfAborted()
    hasher.update(new Uint8Array(await piece.slice(at, at + STEP_BYTES).arrayBuffer()))
    await new Promise(resolve => setTimeout(resolve))
  }
  return hasher.digest('hex')
}

/** SHA-256 over the parts' SHA-256s, as the site reckons it. */
export function combineHashes(partHashes: readonly string[]): Promise<string> {
  const bytes = new Uint8Array(partHashes.length * 32)
  partHashes.forEach((hash, n) => bytes.set(fromHex(hash), n * 32))
  return sha256Of(new Blob([bytes]))
}

/** SHA-256 over a file's size and samples of it: the same file has the same one after a reload, under whatever name. */
export async function fingerprintOf(file: Blob): Promise<string> {
  const samples = fingerprintRanges(file.size).map(({ start, end }) => file.slice(start, end))
  return sha256Of(new Blob([`${file.size}\n`, ...samples]))
}

function toHex(bytes: Uint8Array): string {
  return Array.from(bytes, byte => byte.toString(16).padStart(2, '0')).join('')
}

function fromHex(hex: string): Uint8Array {
  return Uint8Array.from(hex.match(/../g) ?? [], pair => Number.parseInt(pair, 16))
}
