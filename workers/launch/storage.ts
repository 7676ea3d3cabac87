import { openStorage } from '#server/adapters/openStorage'
import type { Environment } from '#server/config/environment'

/** Makes the bucket and lets our pages' origin reach it. */
export async function prepareStorage(settings: Environment): Promise<void> {
  const origin = new URL(settings.PUBLIC_URL)
  // The same machine is known by both names; people type either.
  const origins = ['localhost', '127.0.0.1'].includes(origin.hostname) ? [`http://localhost:${origin.port}`, `http://127.0.0.1:${origin.port}`] : [origin.origin]
  await openStorage(settings).ensureBucket(origins)
}
