import { randomBytes } from 'node:crypto'
import { mkdir, open, readFile, rename, rm, unlink } from 'node:fs/promises'
import { dirname, join } from 'node:path'

/** A rename is only sure to survive a power cut once its folder has been synced. */
export async function syncFolder(path: string): Promise<void> {
  const handle = await open(path, 'r')
  try {
    await handle.sync()
  }
  finally {
    await handle.close()
  }
}

export async function makeFolder(path: string): Promise<void> {
  const made = await mkdir(path, { recursive: true, mode: 0o700 })
  if (made) await syncFolder(dirname(path))
}

/** Replaces a JSON file so that a crash at any moment leaves the old or the new one, whole. */
export async function writeJson(tempDir: string, path: string, value: unknown): Promise<void> {
  const temp = join(tempDir, randomBytes(16).toString('hex'))
  const handle = await open(temp, 'wx', 0o600)
  try {
    await handle.writeFile(JSON.stringify(value))
    await handle.sync()
  }
  catch (error) {
    await handle.close()
    await unlink(temp)
    throw error
  }
  await handle.close()
  await rename(temp, path)
  await syncFolder(dirname(path))
}

export async function readJson<T>(path: string): Promise<T> {
  try {
    return JSON.parse(await readFile(path, 'utf8')) as T
  }
  catch (cause) {
    throw new Error(`The storage record ${path} cannot be read. Nothing was changed. Restore it from a backup or move it away.`, { cause })
  }
}

export async function removeFile(path: string): Promise<void> {
  await rm(path, { force: true })
  await syncFolder(dirname(path))
}

/** Runs work on one key at a time, in the order asked. */
export class KeyedLock {
  private readonly tails = new Map<string, Promise<unknown>>()

  async run<T>(key: string, work: () => Promise<T>): Promise<T> {
    const before = this.tails.get(key) ?? Promise.resolve()
    const mine = before.then(work, work)
    const tail = mine.catch(() => undefined)
    this.tails.set(key, tail)
    try {
      return await mine
    }
    finally {
      if (this.tails.get(key) === tail) this.tails.delete(key)
    }
  }
}
