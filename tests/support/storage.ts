import { randomBytes } from 'node:crypto'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createS3Storage, type S3StorageConfig } from '#server/adapters/s3Storage'
import type { Storage } from '#server/adapters/storage'
import { startStorageServer } from '../../workers/local/storage/server'

export interface TestStorage {
  storage: Storage
  config: Required<S3StorageConfig>
  /** Stops the server and removes what it stored. */
  stop(): Promise<void>
}

/** The real local storage on a free port with a folder and a bucket of its own. */
export async function startTestStorage(options: { origins?: string[] } = {}): Promise<TestStorage> {
  const dataDir = await mkdtemp(join(tmpdir(), 'ribband-storage-'))
  const credentials = { accessKeyId: `test${randomBytes(6).toString('hex')}`, secretAccessKey: randomBytes(20).toString('hex'), region: 'us-east-1' }
  const server = await startStorageServer({ dataDir, host: '127.0.0.1', port: 0, ...credentials })
  const config = { ...credentials, endpoint: server.url, publicEndpoint: server.url, bucket: 'ribband-test' }
  const storage = createS3Storage(config)
  await storage.ensureBucket(options.origins ?? [])
  return {
    storage,
    config,
    stop: async () => {
      storage.close()
      await server.close()
      await rm(dataDir, { recursive: true, force: true })
    },
  }
}
