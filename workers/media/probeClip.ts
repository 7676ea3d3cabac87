import { eq } from 'drizzle-orm'
import { clips } from '#server/database/schema'
import { alignSession } from '#server/services/clips'
import { enqueueTask, readTracksAgain, setTask } from '#server/services/clipTasks'
import { hashFile } from '#server/services/contentHash'
import { clipJob } from './clipJob'
import { keepEmbeddedCaptions, readEmbeddedCaptions } from './embeddedCaptions'
import { clipFault } from './ffmpeg/faults'
import { planProxy } from './ffmpeg/makeProxy'
import { probeClip as probe } from './ffmpeg/probe'
import { indexesFromProxy } from './indexFootage'

/** What a clip is, whether it arrived as it left, where it lies on the session's clock, and what is to be made of it. */
export const probeClip = clipJob('probe-clip', async ({ context, clip, signal, report }) => {
  report(0, 'Fetching the clip')
  return context.originals.use(clip.objectKey, clip.sizeBytes, signal, async (path) => {
    report(0.5, 'Finding out what it holds')
    const found = await probe(path, { sizeBytes: clip.sizeBytes, signal })
    if (clip.contentHash && await hashFile(path, clip.sizeBytes, signal) !== clip.contentHash) {
      throw clipFault('damaged', 'what the storage holds is not what the browser sent')
    }
    const captions = await readEmbeddedCaptions(context, path, found, signal)
    return async (tx) => {
      const camera = clip.camera || (found.device ?? '')
      await tx.update(clips).set({ probe: found, durationMs: found.durationMs, camera: camera.slice(0, 60) }).where(eq(clips.id, clip.id))
      await alignSession(tx, clip.sessionId)
      await keepEmbeddedCaptions(tx, clip, captions)
      await readTracksAgain(tx, clip)
      if (planProxy(found) !== 'none') await enqueueTask(tx, clip, 'make-proxy')
      // The copy for watching has keyframes close together: made first, it spares one decode of everything.
      if (indexesFromProxy(found)) await setTask(tx, clip, 'index-footage', { state: 'waiting', message: 'Waits for the copy for watching' })
      else await enqueueTask(tx, clip, 'index-footage')
    }
  })
})
