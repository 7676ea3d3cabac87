import { stat } from 'node:fs/promises'
import { join } from 'node:path'
import { eq } from 'drizzle-orm'
import { clips } from '#server/database/schema'
import { enqueueTask } from '#server/services/clipTasks'
import { clipPrefix } from '#server/services/objectKeys'
import { clipJob } from './clipJob'
import { clipFault } from './ffmpeg/faults'
import { makeProxy as encode, planProxy } from './ffmpeg/makeProxy'
import { indexesFromProxy } from './indexFootage'

/** The copy for watching, where the browser could not play or promptly seek the original. */
export const makeProxy = clipJob('make-proxy', async ({ context, clip, signal, report }) => {
  const { probe } = clip
  if (!probe) throw clipFault('internal', 'it was not probed before its copy was made')
  if (planProxy(probe) === 'none') return async () => {}
  report(0, 'Fetching the clip')
  return context.originals.use(clip.objectKey, clip.sizeBytes, signal, path => context.originals.withScratch(async (folder) => {
    const out = join(folder, 'proxy.mp4')
    report(0, 'Making a copy for watching')
    await encode(path, probe, out, { signal, onProgress: share => report(share * 0.95, 'Making a copy for watching') })
    report(0.95, 'Storing the copy')
    const key = `${clipPrefix(clip.id)}proxy.mp4`
    await context.storage.writeFile(key, out, 'video/mp4', signal)
    const indexNext = indexesFromProxy(probe)
    if (indexNext) await context.originals.adopt(key, out, (await stat(out)).size)
    return async (tx) => {
      await tx.update(clips).set({ proxyKey: key }).where(eq(clips.id, clip.id))
      if (indexNext) await enqueueTask(tx, clip, 'index-footage')
    }
  }))
})
