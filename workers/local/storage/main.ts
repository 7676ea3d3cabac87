import process from 'node:process'
import { z } from 'zod'
import { startStorageServer } from './server'

/** Runs the storage by itself: `node --import tsx workers/local/storage/main.ts`. */
const settings = z.object({
  STORAGE_DATA_DIR: z.string().min(1),
  STORAGE_HOST: z.string().min(1).default('127.0.0.1'),
  STORAGE_PORT: z.coerce.number().int().min(0).max(65535),
  STORAGE_CORS_ORIGINS: z.string().default('').transform(text => text.split(',').map(origin => origin.trim()).filter(Boolean)),
  STORAGE_MEDIA_RANGE_CAP_BYTES: z.coerce.number().int().min(0).optional(),
  S3_ACCESS_KEY_ID: z.string().min(3),
  S3_SECRET_ACCESS_KEY: z.string().min(8),
  S3_REGION: z.string().min(1).default('us-east-1'),
})

function fail(message: string): never {
  process.stderr.write(`storage: ${message}\n`)
  process.exit(1)
}

const parsed = settings.safeParse(process.env)
if (!parsed.success) {
  const issue = parsed.error.issues[0]!
  fail(`${issue.path.join('.')} is wrong: ${issue.message}`)
}
const env = parsed.data
const server = await startStorageServer({
  dataDir: env.STORAGE_DATA_DIR,
  host: env.STORAGE_HOST,
  port: env.STORAGE_PORT,
  accessKeyId: env.S3_ACCESS_KEY_ID,
  secretAccessKey: env.S3_SECRET_ACCESS_KEY,
  region: env.S3_REGION,
  corsOrigins: env.STORAGE_CORS_ORIGINS,
  mediaRangeCapBytes: env.STORAGE_MEDIA_RANGE_CAP_BYTES,
}).catch((error: unknown) => fail(error instanceof Error ? error.message : String(error)))
process.stdout.write(`${JSON.stringify({ ready: true, url: server.url })}\n`)

for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.once(signal, () => void server.close().then(() => process.exit(0)))
}
