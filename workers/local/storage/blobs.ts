import { randomBytes } from 'node:crypto'
import { link, open, readdir, rename, rm, stat, type FileHandle } from 'node:fs/promises'
import { join } from 'node:path'
import type { Writable } from 'node:stream'
import { makeFolder, syncFolder } from './durable'
import { Pump } from './pump'

/** A run of bytes held in one immutable file. An object is a list of these, one for each part. */
export interface Extent { blob: string, sizeBytes: number }

const WRITE_BATCH = 1024 * 1024

/**
 * The files that hold the bytes. Names are random, contents never change, and a file that no record
 * mentions is a leftover. Files being read are kept until the last reader is done.
 */
export class Blobs {
  private readonly pins = new Map<string, number>()
  private readonly doomed = new Set<string>()

  private constructor(private readonly dir: string, private readonly tempDir: string) {}

  static async open(dir: string, tempDir: string): Promise<Blobs> {
    await makeFolder(dir)
    return new Blobs(dir, tempDir)
  }

  /** Streams `source` to disk in bounded memory. Nothing is left behind if it throws. */
  async write(source: AsyncIterable<Buffer>, onBytes: (bytes: Buffer) => void): Promise<Extent> {
    const blob = randomBytes(16).toString('hex')
    const temp = join(this.tempDir, blob)
    const handle = await open(temp, 'wx', 0o600)
    let extent: Extent
    try {
      extent = { blob, sizeBytes: await pour(source, handle, onBytes) }
      await handle.datasync()
      await handle.close()
      await rename(temp, join(this.dir, blob))
    }
    catch (error) {
      await handle.close().catch(() => undefined)
      await rm(temp, { force: true })
      throw error
    }
    await syncFolder(this.dir)
    return extent
  }

  /** A second name for the same bytes, so that a copy costs no copying. */
  async clone(extents: Extent[]): Promise<Extent[]> {
    const copies: Extent[] = []
    try {
      for (const extent of extents) {
        const blob = randomBytes(16).toString('hex')
        await link(join(this.dir, extent.blob), join(this.dir, blob))
        copies.push({ ...extent, blob })
      }
    }
    catch (error) {
      this.discard(copies)
      throw error
    }
    await syncFolder(this.dir)
    return copies
  }

  /** Keeps the files until the returned function is called. */
  pin(extents: Extent[]): () => void {
    for (const { blob } of extents) this.pins.set(blob, (this.pins.get(blob) ?? 0) + 1)
    let held = true
    return () => {
      if (!held) return
      held = false
      for (const { blob } of extents) {
        const left = this.pins.get(blob)! - 1
        if (left > 0) this.pins.set(blob, left)
        else this.pins.delete(blob)
        if (left <= 0 && this.doomed.delete(blob)) this.unlinkLater(blob)
      }
    }
  }

  /** Gives up files that no record mentions any more. What fails here is swept at the next start. */
  discard(extents: Extent[]): void {
    for (const { blob } of extents) {
      if (this.pins.has(blob)) this.doomed.add(blob)
      else this.unlinkLater(blob)
    }
  }

  private unlinkLater(blob: string): void {
    rm(join(this.dir, blob), { force: true }).catch(() => undefined)
  }

  /** Throws when a file that these bytes lie in is missing or has another length than its record says. */
  async check(extents: Extent[], start: number, end: number): Promise<void> {
    for (const { extent } of slices(extents, start, end)) {
      const { size } = await stat(join(this.dir, extent.blob))
      if (size !== extent.sizeBytes) throw new Error(`Stored bytes are damaged: ${extent.blob} has ${size} bytes, not ${extent.sizeBytes}.`)
    }
  }

  /** Sends bytes `start` to `end` (inclusive) of the extents, end to end. */
  async send(extents: Extent[], start: number, end: number, sink: Writable): Promise<void> {
    const pump = new Pump(sink)
    for (const { extent, from, to } of slices(extents, start, end)) {
      const handle = await open(join(this.dir, extent.blob), 'r')
      try {
        for (let position = from; position <= to;) {
          const taken = await pump.pass((buffer) => {
            return handle.read(buffer, 0, Math.min(buffer.length, to - position + 1), position)
          })
          if (taken === 0) throw new Error(`Stored bytes are damaged: ${extent.blob} ends early.`)
          position += taken
        }
      }
      finally {
        await handle.close()
      }
    }
    await pump.finish()
  }

  async sweep(used: Set<string>): Promise<number> {
    const leftovers = (await readdir(this.dir)).filter(name => !used.has(name))
    for (const name of leftovers) await rm(join(this.dir, name), { force: true })
    return leftovers.length
  }
}

/** Which bytes of which files make up `start` to `end` (inclusive) of the whole. */
function* slices(extents: Extent[], start: number, end: number): Generator<{ extent: Extent, from: number, to: number }> {
  let offset = 0
  for (const extent of extents) {
    const from = Math.max(start - offset, 0)
    const to = Math.min(end - offset, extent.sizeBytes - 1)
    offset += extent.sizeBytes
    if (from <= to) yield { extent, from, to }
  }
}

async function pour(source: AsyncIterable<Buffer>, handle: FileHandle, onBytes: (bytes: Buffer) => void): Promise<number> {
  let [total, waiting] = [0, 0]
  let batch: Buffer[] = []
  const flush = async () => {
    if (batch.length === 0) return
    const { bytesWritten } = await handle.writev(batch)
    if (bytesWritten !== waiting) throw Object.assign(new Error('The disk took fewer bytes than given.'), { code: 'ENOSPC' })
    batch = []
    waiting = 0
  }
  for await (const bytes of source) {
    onBytes(bytes)
    batch.push(bytes)
    waiting += bytes.length
    total += bytes.length
    if (waiting >= WRITE_BATCH || batch.length >= 256) await flush()
  }
  await flush()
  return total
}
