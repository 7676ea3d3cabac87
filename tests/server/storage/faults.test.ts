import { spawn, type ChildProcess } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { once } from 'node:events'
import { mkdtemp, readdir, rm, utimes, writeFile } from 'node:fs/promises'
import { connect } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createInterface } from 'node:readline'
import { setTimeout as pause } from 'node:timers/promises'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { createS3Storage } from '#server/adapters/s3Storage'
import type { Storage } from '#server/adapters/storage'
import { signHeaders } from '../../support/s3Signing'
import { startStorageServer } from '../../../workers/local/storage/server'

/**
 * The local storage as its own process, killed with SIGKILL at bad moments. What it left is then
 * opened by a server in this process, which takes the same way in and starts faster.
 */
const MIB = 1024 ** 2
const ROUNDS = 3
const keys = { accessKeyId: 'fault-key', secretAccessKey: 'fault-secret-key', region: 'us-east-1' }
const bucket = 'faults'
let dataDir: string
const running = new Set<ChildProcess>()

function spawnServer(): ChildProcess {
  const child = spawn(process.execPath, ['--import', 'tsx', 'workers/local/storage/main.ts'], {
    env: { ...process.env, STORAGE_DATA_DIR: dataDir, STORAGE_PORT: '0', S3_ACCESS_KEY_ID: keys.accessKeyId, S3_SECRET_ACCESS_KEY: keys.secretAccessKey, S3_REGION: keys.region },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  running.add(child)
  child.once('exit', () => running.delete(child))
  return child
}

/** Starts the program; `kill` gives its exit code. */
async function start() {
  const child = spawnServer()
  const [line] = await once(createInterface(child.stdout!), 'line') as [string]
  const { ready, url } = JSON.parse(line) as { ready: boolean, url: string }
  expect(ready).toBe(true)
  const storage = createS3Storage({ ...keys, bucket, endpoint: url })
  await storage.ensureBucket([])
  const kill = async (signal: NodeJS.Signals) => {
    storage.close()
    const gone = once(child, 'exit')
    child.kill(signal)
    const [code] = await gone as [number | null]
    return code
  }
  return { url, storage, kill }
}

/** Opens what is on disk and looks at it. */
async function inspect(look: (storage: Storage) => Promise<void>, options: { uploadExpiryMs?: number } = {}): Promise<void> {
  const server = await startStorageServer({ dataDir, host: '127.0.0.1', port: 0, ...keys, ...options, log: () => undefined })
  const storage = createS3Storage({ ...keys, bucket, endpoint: server.url })
  try {
    await storage.ensureBucket([])
    await look(storage)
  }
  finally {
    storage.close()
    await server.close()
  }
}

const blobCount = async () => (await readdir(join(dataDir, 'blobs'))).length

beforeEach(async () => {
  dataDir = await mkdtemp(join(tmpdir(), 'ribband-faults-'))
})
afterEach(async () => {
  for (const child of running) {
    child.kill('SIGKILL')
    await once(child, 'exit')
  }
  await rm(dataDir, { recursive: true, force: true })
})

describe('killed', { timeout: 90_000 }, () => {
  it('in the middle of a PUT: the old object stays, whole, and nothing is left over', async () => {
    const server = await start()
    await server.storage.write('object', 'the old one', 'text/plain')
    const { host, hostname, port } = new URL(server.url)
    const signed = await signHeaders({ method: 'PUT', path: `/${bucket}/object`, headers: { host, 'x-amz-content-sha256': 'UNSIGNED-PAYLOAD' } }, keys)
    const socket = connect(Number(port), hostname)
    socket.on('error', () => undefined)
    const head = Object.entries({ ...signed.headers, 'content-length': '8000000' }).map(([name, value]) => `${name}: ${value}\r\n`).join('')
    socket.write(`PUT ${signed.path} HTTP/1.1\r\n${head}\r\n`)
    await new Promise(resolve => socket.write(randomBytes(4 * MIB), resolve))
    await expect.poll(() => readdir(join(dataDir, 'tmp')), { timeout: 10_000 }).toHaveLength(1)
    await server.kill('SIGKILL')
    socket.destroy()
    await inspect(async (storage) => {
      expect((await storage.readBuffer('object')).toString()).toBe('the old one')
      expect(await readdir(join(dataDir, 'tmp'))).toEqual([])
      expect(await blobCount()).toBe(1)
    })
  })

  it('at any moment while one object is replaced again and again: what was acknowledged is there', async () => {
    let version = 0
    const body = (number: number) => Buffer.alloc(50_000 + number, `version ${number}\n`)
    for (let round = 0; round < ROUNDS; round++) {
      const server = await start()
      const acknowledged: number[] = []
      const writing = (async () => {
        for (;;) {
          await server.storage.write('object', body(++version), 'text/plain')
          acknowledged.push(version)
        }
      })().catch(() => undefined)
      await expect.poll(() => acknowledged.length, { timeout: 10_000 }).toBeGreaterThan(2)
      await pause(round * 7)
      await server.kill('SIGKILL')
      await writing
      await inspect(async (storage) => {
        const found = await storage.readBuffer('object')
        const standing = found.length - 50_000
        expect(standing).toBeGreaterThanOrEqual(acknowledged.at(-1)!)
        expect(found.equals(body(standing))).toBe(true)
        expect(await blobCount()).toBe(1)
      })
    }
  })

  it('in the middle of Complete: either the object is whole or the upload goes on where it stopped', async () => {
    const parts = [randomBytes(5 * MIB), randomBytes(1000)]
    for (let round = 0; round < ROUNDS; round++) {
      const key = `clip ${round}`
      const server = await start()
      const uploadId = await server.storage.beginUpload(key, 'video/mp4')
      const sent: { partNumber: number, etag: string }[] = []
      for (const [index, part] of parts.entries()) {
        const answer = await fetch(await server.storage.presignPart(key, uploadId, index + 1, 60), { method: 'PUT', body: new Uint8Array(part) })
        sent.push({ partNumber: index + 1, etag: answer.headers.get('etag')! })
      }
      // The first round is killed before it asks, the others a little later each.
      const completing = round > 0 ? server.storage.completeUpload(key, uploadId, sent).catch(() => undefined) : null
      await pause(round * 5)
      await server.kill('SIGKILL')
      await completing
      await inspect(async (storage) => {
        if (!await storage.head(key)) {
          expect(await storage.listParts(key, uploadId)).toMatchObject([{ partNumber: 1, sizeBytes: 5 * MIB }, { partNumber: 2, sizeBytes: 1000 }])
          await storage.completeUpload(key, uploadId, sent)
        }
        expect((await storage.readBuffer(key)).equals(Buffer.concat(parts))).toBe(true)
        expect(await storage.listParts(key, uploadId)).toBeNull()
        expect(await blobCount()).toBe(2 * (round + 1))
      })
    }
  })
})

describe('starting and stopping', { timeout: 90_000 }, () => {
  it('refuses a folder that another server is using, and ends by itself on SIGTERM', async () => {
    const server = await start()
    const second = spawnServer()
    const said: Buffer[] = []
    second.stderr!.on('data', bytes => said.push(bytes))
    const [code] = await once(second, 'close')
    expect([code, Buffer.concat(said).toString()]).toEqual([1, `storage: Another storage server is using ${dataDir}. Stop it first.\n`])
    expect(await server.kill('SIGTERM')).toBe(0)
  })

  it('changes nothing when a record cannot be read', async () => {
    await inspect(storage => storage.write('object', 'x', 'text/plain'))
    const [folder] = await readdir(join(dataDir, 'buckets'))
    const [record] = await readdir(join(dataDir, 'buckets', folder!, 'objects'))
    await writeFile(join(dataDir, 'buckets', folder!, 'objects', record!), '{"half":')
    await expect(inspect(async () => undefined)).rejects.toThrow(/cannot be read. Nothing was changed/)
    expect(await blobCount()).toBe(1)
  })

  it('drops uploads that were abandoned, and only those', async () => {
    let [stale, fresh] = ['', '']
    await inspect(async (storage) => {
      stale = await storage.beginUpload('stale', 'video/mp4')
      fresh = await storage.beginUpload('fresh', 'video/mp4')
      await fetch(await storage.presignPart('stale', stale, 1, 60), { method: 'PUT', body: 'part' })
    })
    const [folder] = await readdir(join(dataDir, 'buckets'))
    const long = Date.now() / 1000 - 7200
    await utimes(join(dataDir, 'buckets', folder!, 'uploads', stale), long, long)
    await inspect(async (storage) => {
      expect(await storage.listParts('stale', stale)).toBeNull()
      expect(await storage.listParts('fresh', fresh)).toEqual([])
      await expect.poll(blobCount).toBe(0)
    }, { uploadExpiryMs: 3600_000 })
  })
})
