import { createHash } from 'node:crypto'
import { PartProblem } from '../../../../app/utils/upload/putPart'
import type { RequestProblem, UploadOutside } from '../../../../app/utils/upload/types'
import { partRange, planParts } from '#shared/utils/upload'

export const PART = 8 * 1024 * 1024
const sha256 = (bytes: Uint8Array | string) => createHash('sha256').update(bytes).digest('hex')

/** A file whose bytes are made when they are read, so that a test may have a large one. */
export function bigFile(size: number, name = 'clip.mp4'): File {
  const blob = { size, name, type: 'video/mp4', slice: (start: number, end: number) => ({ size: end - start, start, end }) }
  return blob as unknown as File
}

export const problem = (status: number, message = 'No.', data: Record<string, unknown> = {}): RequestProblem => Object.assign(new Error(message), { status, code: status === 409 ? 'conflict' : 'other', data })
export { PartProblem }

/** The site and the storage as an upload sees them, kept to the same rules, with faults put in on purpose. */
export function makeOutside(size: number) {
  const plan = planParts(size)
  const stored = new Map<number, string>()
  const log: string[] = []
  let clock = 0
  const world = {
    plan, stored, log,
    inFlight: 0,
    mostInFlight: 0,
    online: true,
    puts: 0,
    /** Called before every PUT; may throw. */
    beforePut: (_part: number, _signal: AbortSignal): Promise<void> | void => {},
    /** Called before every sum; may throw. */
    beforeHash: (_piece: unknown): Promise<void> | void => {},
    complete: (_clipId: string, _parts: { partNumber: number }[]): unknown => ({}),
    begin: null as null | UploadOutside['begin'],
  }
  const outside: UploadOutside = {
    begin: async (input) => {
      log.push(`begin${input.contentHash ? ' with hash' : ''}`)
      if (world.begin) return world.begin(input)
      return { kind: 'upload', clipId: 'clip-1', ...plan, uploaded: [...stored].map(([partNumber, etag]) => ({ partNumber, etag, sizeBytes: partSize(size, plan.partSizeBytes, partNumber) })) }
    },
    addresses: async (_clipId, partNumbers) => {
      log.push(`addresses ${partNumbers.join(',')}`)
      return { parts: partNumbers.map(partNumber => ({ partNumber, url: `put:${partNumber}` })) }
    },
    put: async (url, piece, { signal, onSent }) => {
      const part = Number(url.split(':')[1])
      world.puts++
      world.mostInFlight = Math.max(world.mostInFlight, ++world.inFlight)
      try {
        await Promise.resolve()
        await world.beforePut(part, signal)
        if (signal.aborted) throw signal.reason
        onSent(piece.size)
        stored.set(part, `etag-${part}`)
        return `etag-${part}`
      }
      finally {
        world.inFlight--
      }
    },
    complete: async (clipId, parts) => {
      log.push('complete')
      return world.complete(clipId, parts)
    },
    fingerprint: async () => sha256('fingerprint'),
    hash: async (piece) => {
      await world.beforeHash(piece)
      return sha256(JSON.stringify(piece))
    },
    combine: async hashes => sha256(hashes.join()),
    online: () => world.online,
    whenOnline: async () => {
      log.push('waited for the line')
      world.online = true
    },
    sleep: async (ms) => {
      clock += ms
      log.push(`slept ${ms}`)
    },
    now: () => clock += 100,
  }
  return { world, outside }
}

function partSize(size: number, partSizeBytes: number, partNumber: number): number {
  const { start, end } = partRange(size, partSizeBytes, partNumber)
  return end - start
}
