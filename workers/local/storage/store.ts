import { createServer } from 'node:net'
import { createHash } from 'node:crypto'
import { readdir, realpath, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { Blobs } from './blobs'
import { Bucket, bucketFolder } from './bucket'
import { KeyedLock, makeFolder, syncFolder } from './durable'
import { noSuchBucket, S3Error } from './errors'

/** Letters, digits, dots and hyphens, 3 to 63 of them (S3 User Guide, "Bucket naming rules"). */
export const BUCKET_NAME = /^(?!.*\.\.)[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/

/**
 * Everything on disk: `tmp/` for files being written, `blobs/` for bytes, and one folder a bucket
 * with its records. A record is only ever replaced by rename, so what a crash leaves is the old or
 * the new one, and files that no record mentions are swept when the store opens.
 */
export class Store {
  private readonly buckets = new Map<string, Bucket>()
  private readonly lock = new KeyedLock()

  private constructor(
    private readonly dir: string,
    private readonly tempDir: string,
    readonly blobs: Blobs,
    private readonly unlock: () => Promise<void>,
  ) {}

  static async open(dataDir: string, log: (line: string) => void): Promise<Store> {
    const [tempDir, bucketsDir] = [join(dataDir, 'tmp'), join(dataDir, 'buckets')]
    for (const folder of [dataDir, tempDir, bucketsDir]) await makeFolder(folder)
    const unlock = await lockFolder(dataDir)
    try {
      for (const name of await readdir(tempDir)) await rm(join(tempDir, name), { recursive: true, force: true })
      const blobs = await Blobs.open(join(dataDir, 'blobs'), tempDir)
      const store = new Store(bucketsDir, tempDir, blobs, unlock)
      await store.load(log)
      return store
    }
    catch (error) {
      await unlock()
      throw error
    }
  }

  private async load(log: (line: string) => void): Promise<void> {
    for (const name of await readdir(this.dir)) {
      const folder = join(this.dir, name)
      if (!(await readdir(folder)).includes('bucket.json')) {
        await rm(folder, { recursive: true, force: true })
        continue
      }
      const bucket = await Bucket.load(folder, this.tempDir, this.blobs)
      this.buckets.set(bucket.record.name, bucket)
    }
    const used = new Set<string>()
    for (const bucket of this.buckets.values()) for (const { blob } of bucket.usedBlobs()) used.add(blob)
    const swept = await this.blobs.sweep(used)
    if (swept) log(`Swept ${swept} unfinished files.`)
  }

  list(): Bucket[] {
    return [...this.buckets.values()].sort((a, b) => (a.record.name < b.record.name ? -1 : 1))
  }

  find(name: string): Bucket | undefined {
    return this.buckets.get(name)
  }

  bucket(name: string): Bucket {
    const bucket = this.buckets.get(name)
    if (!bucket) throw noSuchBucket()
    return bucket
  }

  /** Asking again for one's own bucket succeeds. */
  async createBucket(name: string): Promise<void> {
    if (!BUCKET_NAME.test(name)) throw new S3Error(400, 'InvalidBucketName', 'The specified bucket is not valid.')
    await this.lock.run(name, async () => {
      if (this.buckets.has(name)) return
      this.buckets.set(name, await Bucket.create(join(this.dir, bucketFolder(name)), this.tempDir, this.blobs, name))
    })
  }

  async removeBucket(name: string): Promise<void> {
    await this.lock.run(name, async () => {
      const bucket = this.bucket(name)
      if (bucket.objects.size) throw new S3Error(409, 'BucketNotEmpty', 'The bucket you tried to delete is not empty.')
      this.buckets.delete(name)
      this.blobs.discard([...bucket.usedBlobs()])
      await rm(join(this.dir, bucketFolder(name), 'bucket.json'))
      await rm(join(this.dir, bucketFolder(name)), { recursive: true, force: true })
      await syncFolder(this.dir)
    })
  }

  async expireUploads(olderThanMs: number): Promise<void> {
    for (const bucket of this.buckets.values()) await bucket.expireUploads(olderThanMs)
  }

  close(): Promise<void> {
    return this.unlock()
  }
}

/**
 * Two servers on one folder would sweep each other's files. Linux drops an abstract socket when its
 * process ends, however it ends, so no stale lock can be left.
 */
async function lockFolder(dataDir: string): Promise<() => Promise<void>> {
  const name = `\0ribband-storage-${createHash('sha256').update(await realpath(dataDir)).digest('hex').slice(0, 40)}`
  const holder = createServer()
  await new Promise<void>((resolve, reject) => {
    holder.once('error', () => reject(new Error(`Another storage server is using ${dataDir}. Stop it first.`)))
    holder.listen(name, resolve)
  })
  holder.unref()
  return () => new Promise(resolve => holder.close(() => resolve()))
}
