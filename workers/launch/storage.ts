import { createS3Storage } from '#server/adapters/s3Storage'
import type { Environment } from '#server/config/environment'

/** The storage a process uses, from its settings. */
export function openStorage(settings: Environment) {
  return createS3Storage({ endpoint: settings.S3_ENDPOINT, publicEndpoint: settings.S3_PUBLIC_ENDPOINT, region: settings.S3_REGION, bucket: settings.S3_BUCKET, accessKeyId: settings.S3_ACCESS_KEY_ID, secretAccessKey: settings.S3_SECRET_ACCESS_KEY })
}

/** Makes the bucket and lets our pages' origin reach it. */
export async function prepareStorage(settings: Environment): Promise<void> {
  const origin = new URL(settings.PUBLIC_URL)
  // The same machine is known by both names; people type either.
  const origins = ['localhost', '127.0.0.1'].includes(origin.hostname) ? [`http://localhost:${origin.port}`, `http://127.0.0.1:${origin.port}`] : [origin.origin]
  await openStorage(settings).ensureBucket(origins)
}
