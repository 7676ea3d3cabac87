import { createHash, randomBytes } from 'node:crypto'
import { readdir, rm, stat } from 'node:fs/promises'
import { join } from 'node:path'
import type { Blobs, Extent } from './blobs'
import { KeyedLock, makeFolder, readJson, removeFile, syncFolder, writeJson } from './durable'
import { noSuchUpload } from './errors'
import type { Attributes, BucketRecord, CorsRule, ObjectRecord, PartRecord, Upload, UploadRecord } from './records'
import { compareKeys } from './sortedKeys'

const hashed = (text: string) => createHash('sha256').update(text).digest('hex')
const partFile = (partNumber: number) => `part-${partNumber}.json`
const UPLOAD_ID = /^[0-9a-f]{32}$/

export const bucketFolder = (name: string) => hashed(name).slice(0, 40)

/**
 * One bucket: its objects and its unfinished uploads. Records are JSON files named by the hash of
 * the key, held in memory as well; replacing the file is the moment at which an object changes.
 */
export class Bucket {
  readonly objects = new Map<string, ObjectRecord>()
  readonly uploads = new Map<string, Upload>()
  private readonly lock = new KeyedLock()
  private sorted: string[] | null = null

  private constructor(
    public record: BucketRecord,
    private readonly dir: string,
    private readonly tempDir: string,
    private readonly blobs: Blobs,
  ) {}

  static async create(dir: string, tempDir: string, blobs: Blobs, name: string): Promise<Bucket> {
    const record: BucketRecord = { name, created: new Date().toISOString(), cors: [] }
    for (const folder of [dir, join(dir, 'objects'), join(dir, 'uploads')]) await makeFolder(folder)
    await writeJson(tempDir, join(dir, 'bucket.json'), record)
    return new Bucket(record, dir, tempDir, blobs)
  }

  /** Reads everything back. Finishes what a crash left half done; throws if a record is unreadable. */
  static async load(dir: string, tempDir: string, blobs: Blobs): Promise<Bucket> {
    const bucket = new Bucket(await readJson<BucketRecord>(join(dir, 'bucket.json')), dir, tempDir, blobs)
    const made = new Set<string>()
    for (const name of await readdir(join(dir, 'objects'))) {
      const object = await readJson<ObjectRecord>(join(dir, 'objects', name))
      bucket.objects.set(object.key, object)
      if (object.uploadId) made.add(object.uploadId)
    }
    for (const uploadId of await readdir(join(dir, 'uploads'))) {
      const upload = made.has(uploadId) ? null : await bucket.loadUpload(uploadId)
      if (upload) bucket.uploads.set(uploadId, upload)
      else await rm(bucket.uploadDir(uploadId), { recursive: true, force: true })
    }
    return bucket
  }

  /** Null when the folder was made but the upload was never acknowledged. */
  private async loadUpload(uploadId: string): Promise<Upload | null> {
    const dir = this.uploadDir(uploadId)
    const names = await readdir(dir)
    if (!names.includes('upload.json')) return null
    const upload: Upload = { ...await readJson<UploadRecord>(join(dir, 'upload.json')), parts: new Map(), touchedMs: (await stat(dir)).mtimeMs }
    for (const name of names.filter(candidate => candidate.startsWith('part-'))) {
      const part = await readJson<PartRecord>(join(dir, name))
      upload.parts.set(part.partNumber, part)
    }
    return upload
  }

  * usedBlobs(): Generator<Extent> {
    for (const object of this.objects.values()) yield* object.extents
    for (const upload of this.uploads.values()) yield* upload.parts.values()
  }

  sortedKeys(): readonly string[] {
    this.sorted ??= [...this.objects.keys()].sort(compareKeys)
    return this.sorted
  }

  async setCors(cors: CorsRule[]): Promise<void> {
    await this.lock.run('cors', async () => {
      const record = { ...this.record, cors }
      await writeJson(this.tempDir, join(this.dir, 'bucket.json'), record)
      this.record = record
    })
  }

  private objectFile(key: string): string {
    return join(this.dir, 'objects', `${hashed(key)}.json`)
  }

  private uploadDir(uploadId: string): string {
    return join(this.dir, 'uploads', uploadId)
  }

  /** `allowed` sees the object that stands there now, inside the lock, and may throw. */
  async putObject(record: ObjectRecord, allowed: (current: ObjectRecord | null) => void): Promise<void> {
    await this.lock.run(`object ${record.key}`, async () => {
      const current = this.objects.get(record.key) ?? null
      allowed(current)
      await writeJson(this.tempDir, this.objectFile(record.key), record)
      this.objects.set(record.key, record)
      if (current) this.blobs.discard(current.extents)
      else this.sorted = null
    })
  }

  async removeObject(key: string): Promise<void> {
    await this.lock.run(`object ${key}`, async () => {
      const current = this.objects.get(key)
      if (!current) return
      await removeFile(this.objectFile(key))
      this.objects.delete(key)
      this.sorted = null
      this.blobs.discard(current.extents)
    })
  }

  async createUpload(key: string, attributes: Attributes): Promise<Upload> {
    const uploadId = randomBytes(16).toString('hex')
    const record: UploadRecord = { uploadId, key, initiated: new Date().toISOString(), ...attributes }
    await makeFolder(this.uploadDir(uploadId))
    await writeJson(this.tempDir, join(this.uploadDir(uploadId), 'upload.json'), record)
    const upload: Upload = { ...record, parts: new Map(), touchedMs: Date.now() }
    this.uploads.set(uploadId, upload)
    return upload
  }

  /** Ids are looked up, never joined to a path before they are known to be ours. */
  upload(key: string, uploadId: string | undefined): Upload {
    const upload = uploadId && UPLOAD_ID.test(uploadId) ? this.uploads.get(uploadId) : undefined
    if (!upload || upload.key !== key) throw noSuchUpload()
    return upload
  }

  async putPart(upload: Upload, part: PartRecord): Promise<void> {
    await this.lock.run(`upload ${upload.uploadId}`, async () => {
      this.upload(upload.key, upload.uploadId)
      await writeJson(this.tempDir, join(this.uploadDir(upload.uploadId), partFile(part.partNumber)), part)
      const before = upload.parts.get(part.partNumber)
      upload.parts.set(part.partNumber, part)
      upload.touchedMs = Date.now()
      if (before) this.blobs.discard([before])
    })
  }

  /** The object takes over the files of the chosen parts as they are; the others are dropped. */
  async completeUpload(upload: Upload, build: () => { record: ObjectRecord, chosen: Set<number> }, allowed: (current: ObjectRecord | null) => void): Promise<ObjectRecord> {
    return this.lock.run(`upload ${upload.uploadId}`, async () => {
      this.upload(upload.key, upload.uploadId)
      const { record, chosen } = build()
      await this.putObject(record, allowed)
      await this.forgetUpload(upload)
      this.blobs.discard([...upload.parts.values()].filter(part => !chosen.has(part.partNumber)))
      return record
    })
  }

  async abortUpload(upload: Upload): Promise<void> {
    await this.lock.run(`upload ${upload.uploadId}`, async () => {
      this.upload(upload.key, upload.uploadId)
      await this.forgetUpload(upload)
      this.blobs.discard([...upload.parts.values()])
    })
  }

  /** `upload.json` goes first: a folder without it is a leftover. */
  private async forgetUpload(upload: Upload): Promise<void> {
    const dir = this.uploadDir(upload.uploadId)
    await removeFile(join(dir, 'upload.json'))
    this.uploads.delete(upload.uploadId)
    await rm(dir, { recursive: true, force: true })
    await syncFolder(join(this.dir, 'uploads'))
  }

  async expireUploads(olderThanMs: number): Promise<void> {
    for (const upload of [...this.uploads.values()]) {
      if (upload.touchedMs < olderThanMs) await this.abortUpload(upload).catch(() => undefined)
    }
  }
}
