import { join } from 'node:path'
import { eq } from 'drizzle-orm'
import { clips } from '#server/database/schema'
import { clipPrefix } from '#server/services/objectKeys'
import { enqueuePencilling } from '#server/services/pencil/queue'
import type { FootageIndex, ProbeResult } from '#shared/types/media'
import { clipJob, type ClipWork } from './clipJob'
import { clipFault } from './ffmpeg/faults'
import { indexFootage as makeIndex, keyframesSuffice, type LocalFootage } from './ffmpeg/indexFootage'
import { planProxy } from './ffmpeg/makeProxy'
import { probeClip } from './ffmpeg/probe'

/** Whether a clip is indexed from its proxy: its own keyframes are far apart and a new copy is encoded anyway. */
export function indexesFromProxy(probe: ProbeResult): boolean {
  return planProxy(probe) === 'encode' && probe.video !== null && !keyframesSuffice(probe)
}

/** Poster, picture sheets, sound peaks, scene changes and silences. */
export const indexFootage = clipJob('index-footage', async (given) => {
  const { context, clip, signal, report } = given
  if (!clip.probe) throw clipFault('internal', 'it was not probed before it was indexed')
  report(0, 'Fetching the clip')
  const fromProxy = indexesFromProxy(clip.probe) && clip.proxyKey !== null
  const source = fromProxy ? await proxyOf(given) : { key: clip.objectKey, sizeBytes: clip.sizeBytes }
  return context.originals.use(source.key, source.sizeBytes, signal, path => context.originals.withScratch(async (outDir) => {
    const probe = fromProxy ? await probeClip(path, { signal }) : clip.probe!
    report(0.02, 'Drawing its pictures and sound')
    const local = await makeIndex(path, probe, { outDir, signal, onProgress: share => report(0.02 + share * 0.9, 'Drawing its pictures and sound') })
    report(0.93, 'Storing pictures and sound')
    const footage = await storeIndex(given, outDir, local)
    return async (tx) => {
      await tx.update(clips).set({ footage }).where(eq(clips.id, clip.id))
      // Where the picture changes a chapter may begin.
      if (footage.sceneChangesMs.length) await enqueuePencilling(tx, clip.sessionId)
    }
  }))
})

async function proxyOf({ context, clip }: ClipWork) {
  const head = await context.storage.head(clip.proxyKey!)
  if (!head) throw clipFault('missing-object')
  return { key: clip.proxyKey!, sizeBytes: head.sizeBytes }
}

async function storeIndex({ context, clip, signal }: ClipWork, folder: string, local: LocalFootage): Promise<FootageIndex> {
  const store = async (file: string, name: string, type: string) => {
    const key = `${clipPrefix(clip.id)}${name}`
    await context.storage.writeFile(key, join(folder, file), type, signal)
    return key
  }
  const images: string[] = []
  for (const [n, file] of (local.sheets?.images ?? []).entries()) images.push(await store(file, `sheets/${n}.jpg`, 'image/jpeg'))
  return {
    poster: local.poster && { key: await store(local.poster.file, 'poster.jpg', 'image/jpeg'), width: local.poster.width, height: local.poster.height },
    sheets: local.sheets && { ...local.sheets, images },
    peaks: local.peaks && { perSecond: local.peaks.perSecond, count: local.peaks.count, key: await store(local.peaks.file, 'peaks', 'application/octet-stream') },
    sceneChangesMs: local.sceneChangesMs,
    silences: local.silences,
    method: local.method,
  }
}
