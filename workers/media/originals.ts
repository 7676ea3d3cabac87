import { mkdir, mkdtemp, readdir, rename, rm, statfs } from 'node:fs/promises'
import { hostname } from 'node:os'
import { join } from 'node:path'
import type { Storage } from '#server/adapters/storage'
import { formatBytes } from '#shared/utils/upload'

/** There is no room for a local copy just now. Worth another try. */
export class NoRoom extends Error {}

interface Copy { path: string, sizeBytes: number, users: number, ready: Promise<void>, expiry?: NodeJS.Timeout }

/** Left free for the system, the database and what jobs write. */
const RESERVE_BYTES = 300_000_000
/** Jobs of one clip follow one another within seconds; after this nobody is coming. */
const KEEP_MS = 120_000
const PREFIX = 'ribband-worker-'

/**
 * Local copies of stored files. Probing, indexing and making a proxy read the same clip one after another or
 * side by side: they share one copy, so that a clip of many gigabytes is fetched once. Everything lies in a private
 * folder of this process.
 */
export class Originals {
  private readonly copies = new Map<string, Copy>()
  private made = 0

  private constructor(private readonly storage: Storage, readonly folder: string) {}

  /** Opens a folder of our own under `parent` and clears away those of workers that are no more. */
  static async open(storage: Storage, parent: string): Promise<Originals> {
    await mkdir(parent, { recursive: true })
    const mine = `${PREFIX}${hostname()}-`
    for (const name of await readdir(parent)) {
      const pid = name.startsWith(mine) ? Number(name.slice(mine.length).split('-')[0]) : Number.NaN
      if (pid !== process.pid && Number.isInteger(pid) && !isRunning(pid)) await rm(join(parent, name), { recursive: true, force: true })
    }
    return new Originals(storage, await mkdtemp(join(parent, `${mine}${process.pid}-`)))
  }

  /** Runs `work` with a local copy of the object, fetched if none is at hand. */
  async use<Result>(key: string, sizeBytes: number, signal: AbortSignal, work: (path: string) => Promise<Result>): Promise<Result> {
    const copy = this.copies.get(key) ?? this.fetch(key, sizeBytes, signal)
    copy.users++
    clearTimeout(copy.expiry)
    try {
      await copy.ready
      return await work(copy.path)
    }
    finally {
      copy.users--
      if (this.copies.get(key) === copy) this.expireLater(key, copy)
    }
  }

  /** Takes over a file that a job has just stored under `key`, so that the next job need not fetch it. */
  async adopt(key: string, path: string, sizeBytes: number): Promise<void> {
    await this.forget(key)
    const own = this.newPath()
    await rename(path, own)
    const copy: Copy = { path: own, sizeBytes, users: 0, ready: Promise.resolve() }
    this.copies.set(key, copy)
    this.expireLater(key, copy)
  }

  /** A folder for what one job writes, removed when the job ends. */
  async withScratch<Result>(work: (folder: string) => Promise<Result>): Promise<Result> {
    const scratch = await mkdtemp(join(this.folder, 'job-'))
    try {
      return await work(scratch)
    }
    finally {
      await rm(scratch, { recursive: true, force: true })
    }
  }

  /** Makes sure that `bytes` more fit on the disk, giving up copies that nobody uses. @throws NoRoom */
  async makeRoom(bytes: number): Promise<void> {
    for (;;) {
      const disk = await statfs(this.folder)
      const free = disk.bavail * disk.bsize
      if (free >= bytes + RESERVE_BYTES) return
      const idle = [...this.copies].find(([, copy]) => copy.users === 0)
      if (!idle) throw new NoRoom(`The worker’s disk has ${formatBytes(Math.max(0, free - RESERVE_BYTES))} free and ${formatBytes(bytes)} are needed.`)
      await this.forget(idle[0])
    }
  }

  async close(): Promise<void> {
    for (const copy of this.copies.values()) clearTimeout(copy.expiry)
    await rm(this.folder, { recursive: true, force: true })
  }

  private fetch(key: string, sizeBytes: number, signal: AbortSignal): Copy {
    const path = this.newPath()
    const ready = this.makeRoom(sizeBytes).then(() => this.storage.fetchToFile(key, path, signal)).catch(async (error: unknown) => {
      if (this.copies.get(key) === copy) this.copies.delete(key)
      await rm(path, { force: true })
      throw error
    })
    const copy: Copy = { path, sizeBytes, users: 0, ready }
    this.copies.set(key, copy)
    return copy
  }

  private expireLater(key: string, copy: Copy): void {
    if (copy.users > 0) return
    clearTimeout(copy.expiry)
    copy.expiry = setTimeout(() => void this.forget(key), KEEP_MS)
    copy.expiry.unref()
  }

  private async forget(key: string): Promise<void> {
    const copy = this.copies.get(key)
    if (!copy || copy.users > 0) return
    clearTimeout(copy.expiry)
    this.copies.delete(key)
    await rm(copy.path, { force: true })
  }

  private newPath(): string {
    return join(this.folder, `copy-${++this.made}`)
  }
}

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  }
  catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM'
  }
}
