import type { UploadBegun } from '#shared/types/uploads'
import { partRange } from '#shared/utils/upload'
import { PartProblem } from './putPart'
import type { Slots } from './slots'
import type { UploadOutside } from './types'

interface Hooks {
  hash: (partNumber: number, signal: AbortSignal) => Promise<string>
  /** Bytes that have left in all, parts in flight included. */
  sent: (bytes: number) => void
  offline: (waiting: boolean) => void
}

/** Parts of one file that are under way at a time; over all files the slots decide. */
const IN_FLIGHT = 4
/** Addresses are asked for in small batches: each is good for an hour only. */
const ADDRESS_BATCH = 8
/** So many refusals in a row, with growing waits between them, are not going to mend themselves. */
const MOST_FAILURES = 8
const LONGEST_WAIT_MS = 30_000

/** Sends the parts of one file that the storage does not have, and works out the checksum of all. */
export class PartSender {
  private readonly etags = new Map<number, string>()
  private readonly underWay = new Map<number, number>()
  private readonly addresses = new Map<number, string>()
  private asking: Promise<void> | null = null
  private failures = 0
  private waiting = 0

  constructor(
    private readonly file: Blob,
    private readonly begun: Extract<UploadBegun, { kind: 'upload' }>,
    private readonly outside: UploadOutside,
    private readonly slots: Slots,
    private readonly hooks: Hooks,
  ) {
    for (const part of begun.uploaded) this.etags.set(part.partNumber, part.etag)
  }

  /** Counts parts as not sent: the storage has lost them or holds something else. */
  forget(partNumbers: number[]): void {
    for (const number of partNumbers) this.etags.delete(number)
  }

  /** Resolves with every part's ETag and checksum when all have arrived. */
  async sendAll(signal: AbortSignal): Promise<{ partNumber: number, etag: string, sha256: string }[]> {
    const { partCount } = this.begun
    const hashes: string[] = []
    let next = 1
    this.report()
    // When one line fails for good the others must not go on by themselves.
    const stop = new AbortController()
    const both = AbortSignal.any([signal, stop.signal])
    const line = async () => {
      while (next <= partCount) {
        const number = next++
        await this.slots.run(both, async () => {
          // The part is summed while it leaves: reading it twice from the disk's cache costs less than waiting twice.
          const summing = this.hooks.hash(number, both).then(hash => hashes[number] = hash)
          await Promise.all([summing, this.etags.has(number) ? null : this.sendOne(number, both)])
        })
      }
    }
    const lines = Array.from({ length: Math.min(IN_FLIGHT, partCount) }, line)
    try {
      await Promise.all(lines)
    }
    catch (error) {
      stop.abort(error)
      await Promise.allSettled(lines)
      throw error
    }
    return Array.from({ length: partCount }, (_, i) => ({ partNumber: i + 1, etag: this.etags.get(i + 1)!, sha256: hashes[i + 1]! }))
  }

  private async sendOne(number: number, signal: AbortSignal): Promise<void> {
    const { start, end } = partRange(this.file.size, this.begun.partSizeBytes, number)
    const piece = this.file.slice(start, end)
    for (;;) {
      signal.throwIfAborted()
      try {
        const url = await this.addressOf(number, signal)
        const etag = await this.outside.put(url, piece, { signal, onSent: bytes => this.move(number, bytes) })
        this.etags.set(number, etag)
        this.failures = 0
        this.underWay.delete(number)
        this.report()
        return
      }
      catch (error) {
        this.underWay.delete(number)
        this.addresses.delete(number)
        this.report()
        if (signal.aborted) throw error
        await this.waitAfter(error, signal)
      }
    }
  }

  /** Waits as long as fits the failure; throws it when no wait will help. */
  private async waitAfter(error: unknown, signal: AbortSignal): Promise<void> {
    const status = error instanceof PartProblem ? error.status : (error as { status?: number }).status ?? -1
    if (error instanceof PartProblem && status === 404) throw new Error('The storage gave this upload up after a long time. Try again to begin afresh; nothing else is affected.')
    const passing = error instanceof PartProblem || status === 0 || status >= 500 || status === 429
    if (!passing) throw error
    if (!this.outside.online()) return this.waitForLine(signal)
    this.failures++
    // An address past its time is simply asked for again.
    if (status === 403 && this.failures === 1) return
    if (this.failures > MOST_FAILURES) {
      if (status === 0) return this.waitForLine(signal)
      throw Object.assign(new Error(`The storage did not take part of the file (${status}), in ${this.failures} tries. What was sent is kept; try again to go on.`), { status })
    }
    await this.outside.sleep(Math.min(LONGEST_WAIT_MS, 500 * 2 ** this.failures), signal)
  }

  private async waitForLine(signal: AbortSignal): Promise<void> {
    if (this.waiting++ === 0) this.hooks.offline(true)
    try {
      await this.outside.whenOnline(signal)
      this.failures = 0
    }
    finally {
      if (--this.waiting === 0 && !signal.aborted) this.hooks.offline(false)
    }
  }

  private async addressOf(number: number, signal: AbortSignal): Promise<string> {
    while (!this.addresses.has(number)) {
      signal.throwIfAborted()
      this.asking ??= this.askFrom(number).finally(() => this.asking = null)
      await this.asking
    }
    return this.addresses.get(number)!
  }

  private async askFrom(number: number): Promise<void> {
    const wanted = [number]
    for (let next = number + 1; next <= this.begun.partCount && wanted.length < ADDRESS_BATCH; next++) {
      if (!this.etags.has(next) && !this.addresses.has(next)) wanted.push(next)
    }
    const { parts } = await this.outside.addresses(this.begun.clipId, wanted)
    for (const { partNumber, url } of parts) this.addresses.set(partNumber, url)
  }

  private move(number: number, bytes: number): void {
    this.underWay.set(number, bytes)
    this.report()
  }

  private report(): void {
    let bytes = 0
    for (const number of this.etags.keys()) {
      const { start, end } = partRange(this.file.size, this.begun.partSizeBytes, number)
      bytes += end - start
    }
    for (const [number, sent] of this.underWay) if (!this.etags.has(number)) bytes += sent
    this.hooks.sent(Math.min(bytes, this.file.size))
  }
}
