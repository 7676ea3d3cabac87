import type { ProxyReason } from '#shared/types/media'
import type { ClipView } from '#shared/types/session'
import { CLIP_TASKS } from '#shared/types/trade'
import type { Clip, ClipTaskRow } from '../database/schema'

/** Reasons that make the original slow to seek in, but not wrong to watch until the copy is there. */
const PLAYABLE_MEANWHILE = new Set<ProxyReason>(['long-gop', 'not-fast-start', 'variable-rate'])

/** A clip as pages see it: addresses of the site's media routes, never object keys. */
export function toClipView(clip: Clip, tasks: ClipTaskRow[]): ClipView {
  const media = `/media/clips/${clip.id}`
  const { probe, footage } = clip
  const { sheets, peaks } = footage ?? {}
  return {
    id: clip.id,
    name: clip.name,
    sizeBytes: clip.sizeBytes,
    state: clip.state,
    failure: clip.failure,
    durationMs: clip.durationMs,
    offsetMs: clip.offsetMs,
    offsetByHand: clip.offsetByHand,
    camera: clip.camera,
    recordedAt: clip.recordedAt?.toISOString() ?? null,
    recordedAtSource: clip.recordedAtSource,
    video: probe?.video ? { width: probe.video.width, height: probe.video.height, frameRate: probe.video.frameRate } : null,
    hasSound: probe?.audio != null,
    src: isPlayable(clip) ? `${media}/video` : null,
    poster: footage?.poster ? `${media}/poster` : null,
    sheets: sheets
      ? {
          intervalMs: sheets.intervalMs, tileWidth: sheets.tileWidth, tileHeight: sheets.tileHeight, columns: sheets.columns, rows: sheets.rows,
          count: sheets.count, timesMs: sheets.timesMs, images: sheets.images.map((_, n) => `${media}/sheets/${n}`),
        }
      : null,
    peaks: peaks ? { perSecond: peaks.perSecond, count: peaks.count, url: `${media}/peaks` } : null,
    sceneChangesMs: footage?.sceneChangesMs ?? [],
    silences: footage?.silences ?? [],
    warnings: probe?.warnings ?? [],
    tasks: CLIP_TASKS.flatMap(name => tasks.filter(task => task.task === name)).map(({ task, state, progress, message }) => ({ task, state, progress, message })),
  }
}

/** Whether the browser can show the right picture at the right time: the copy for watching, or an original that needs none. */
export function isPlayable(clip: Pick<Clip, 'probe' | 'proxyKey'>): boolean {
  return clip.proxyKey !== null || (clip.probe !== null && clip.probe.proxyReasons.every(reason => PLAYABLE_MEANWHILE.has(reason)))
}
