import type { Environment } from '../config/environment'
import { createS3Storage } from './s3Storage'

/** The storage that the settings name: the same for the site, the media worker and whoever starts them. */
export function openStorage(settings: Environment): ReturnType<typeof createS3Storage> {
  return createS3Storage({
    endpoint: settings.S3_ENDPOINT, publicEndpoint: settings.S3_PUBLIC_ENDPOINT, region: settings.S3_REGION,
    bucket: settings.S3_BUCKET, accessKeyId: settings.S3_ACCESS_KEY_ID, secretAccessKey: settings.S3_SECRET_ACCESS_KEY,
  })
}
