import { randomBytes } from 'node:crypto'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import process from 'node:process'
import { DeleteBucketCommand, S3Client } from '@aws-sdk/client-s3'
import { createS3Storage, type S3StorageConfig } from '#server/adapters/s3Storage'
import type { Storage } from '#server/adapters/storage'
import { startStorageServer } from '../../workers/local/storage/server'

/**
 * The S3 service that the contract suite is held against: our own by default, or the one that
 * TEST_S3_ENDPOINT, TEST_S3_REGION, TEST_S3_ACCESS_KEY_ID and TEST_S3_SECRET_ACCESS_KEY name.
 * Everything happens in a bucket of its own, which is removed afterwards.
 */
export interface S3Target {
  config: Required<S3StorageConfig>
  storage: Storage
  /** The SDK as other programs use it: with its default checksums. */
  sdk: S3Client
  /** Where our own server keeps its files; null when another service is tested. */
  dataDir: string | null
  host: string
  stop(): Promise<void>
}

process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED ??= 'true'

export const isOutsideTarget = Boolean(process.env.TEST_S3_ENDPOINT)

async function startOwn() {
  const dataDir = await mkdtemp(join(tmpdir(), 'ribband-s3-'))
  const keys = { accessKeyId: 'contract-key', secretAccessKey: randomBytes(20).toString('hex'), region: 'eu-west-2' }
  const server = await startStorageServer({ dataDir, host: '127.0.0.1', port: 0, ...keys })
  return {
    keys,
    dataDir,
    endpoint: server.url,
    stop: async () => {
      await server.close()
      await rm(dataDir, { recursive: true, force: true })
    },
  }
}

function outside(endpoint: string) {
  const read = (name: string, fallback = '') => process.env[name] ?? fallback
  const keys = { accessKeyId: read('TEST_S3_ACCESS_KEY_ID'), secretAccessKey: read('TEST_S3_SECRET_ACCESS_KEY'), region: read('TEST_S3_REGION', 'us-east-1') }
  return { keys, endpoint, dataDir: null, stop: async () => undefined }
}

export async function openS3Target(origins: string[] = ['https://site.example']): Promise<S3Target> {
  const target = isOutsideTarget ? outside(process.env.TEST_S3_ENDPOINT!) : await startOwn()
  const { keys, endpoint } = target
  const config = { ...keys, endpoint, publicEndpoint: endpoint, bucket: `ribband-contract-${randomBytes(6).toString('hex')}` }
  const sdk = new S3Client({ endpoint, region: keys.region, credentials: keys, forcePathStyle: true })
  const storage = createS3Storage(config)
  await storage.ensureBucket(origins)
  return {
    config,
    storage,
    sdk,
    dataDir: target.dataDir,
    host: new URL(endpoint).host,
    stop: async () => {
      const left: string[] = []
      for await (const { key } of storage.list('')) left.push(key)
      await storage.remove(left)
      await sdk.send(new DeleteBucketCommand({ Bucket: config.bucket }))
      sdk.destroy()
      storage.close()
      await target.stop()
    },
  }
}
