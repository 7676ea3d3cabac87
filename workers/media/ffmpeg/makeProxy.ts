import { statfs, rm } from 'node:fs/promises'
import { dirname } from 'node:path'
import type { ProbeResult, ProxyReason } from '#shared/types/media'
import { clipFault, faultOf } from './faults'
import { fitInto } from './frames'
import { probeClip } from './probe'
import { inputLimits, localFile, runFfmpeg } from './run'

export interface ProxyOptions {
  signal?: AbortSignal
  /** Called with the share that is done, 0 – 1. */
  onProgress?: (share: number) => void
}

export type ProxyPlan = 'none' | 'remux' | 'encode'

/** Faults of the wrapping only: picture and sound can be copied into a better one. */
const COPY_MENDS = new Set<ProxyReason>(['container', 'not-fast-start', 'audio-codec'])
const PROXY_HEIGHT = 720
/** Keyframes every half second at 30 a second: a seek then takes 60–90 ms. */
const GOP = 15
/** Above this viewers see no more of a bench, and every frame costs a seek. */
const FASTEST = 60
const ORDINARY_RATES = [24, 25, 30, 50, 60]
/** Largest share of the original that a proxy may take: even noise stays far below at this quality. */
const MOST_BYTES_PER_S = 4_000_000

/** What it takes to make a clip play and seek well in browsers. */
export function planProxy(probe: ProbeResult): ProxyPlan {
  if (probe.proxyReasons.length === 0) return 'none'
  const copies = probe.proxyReasons.every(reason => COPY_MENDS.has(reason)) && (!probe.video || probe.video.codec === 'h264')
  return copies ? 'remux' : 'encode'
}

/**
 * Makes the copy that people watch: MP4 with its index in front, without the recording's metadata (place, serial
 * numbers), starting at zero. As `encode`: H.264 at up to 720p, never enlarged, turned upright, a keyframe every 15
 * frames, an even frame rate. As `remux`: picture copied, sound made into AAC where needed. The original is not touched.
 * @param outPath absolute path of the file to write; removed again when this fails
 * @throws ClipFault when the clip cannot be decoded or the disk is full; other errors are worth another try
 */
export async function makeProxy(path: string, probe: ProbeResult, outPath: string, options: ProxyOptions = {}): Promise<void> {
  const plan = planProxy(probe)
  if (plan === 'none') throw new TypeError('This clip needs no proxy.')
  const most = plan === 'remux' ? probe.sizeBytes * 2 + 10_000_000 : 50_000_000 + probe.durationMs / 1000 * MOST_BYTES_PER_S
  try {
    await refuseFullDisk(outPath, plan === 'remux' ? probe.sizeBytes : 0)
    await runFfmpeg([
      ...inputLimits(), '-i', localFile(path),
      ...probe.video ? ['-map', '0:V:0', ...pictureArgs(probe, plan)] : [],
      ...probe.audio ? ['-map', '0:a:0', ...soundArgs(probe, plan)] : [],
      '-map_metadata', '-1', '-map_chapters', '-1', '-fs', String(Math.round(most)), '-movflags', '+faststart', '-f', 'mp4', localFile(outPath),
    ], {
      signal: options.signal,
      timeoutMs: 10 * 60_000 + probe.durationMs * 6,
      onProgress: positionMs => options.onProgress?.(Math.min(1, positionMs / probe.durationMs)),
    })
    await refuseShort(outPath, probe, options.signal)
  }
  catch (error) {
    await rm(outPath, { force: true })
    throw faultOf(error)
  }
}

function pictureArgs(probe: ProbeResult, plan: ProxyPlan): string[] {
  if (plan === 'remux') return ['-c:v', 'copy']
  const video = probe.video!
  // 720 across the short side, so that an upright phone clip is as sharp as a lying one.
  const upright = video.height > video.width
  const { width, height } = upright ? fitInto(video, PROXY_HEIGHT, 2560) : fitInto(video, 2560, PROXY_HEIGHT)
  return [
    // ffmpeg turns the picture by itself before these filters. `deint=interlaced` leaves other footage alone.
    '-vf', `yadif=deint=interlaced,scale=${width}:${height}:flags=bicubic,setsar=1${toOrdinaryColours(probe)}`,
    '-fps_mode', 'cfr', '-r', evenRate(video),
    '-c:v', 'libx264', '-preset', 'veryfast', '-crf', '23', '-g', String(GOP), '-keyint_min', String(GOP), '-sc_threshold', '0', '-pix_fmt', 'yuv420p',
  ]
}

/** The clip's own rate; for an uneven one the ordinary rate above its average, so that no picture is lost. */
function evenRate({ frameRate: { numerator, denominator }, variableFrameRate }: NonNullable<ProbeResult['video']>): string {
  const average = numerator / denominator
  if (average > FASTEST) return String(FASTEST)
  if (!variableFrameRate) return `${numerator}/${denominator}`
  return String(ORDINARY_RATES.find(rate => rate >= average * 0.99) ?? FASTEST)
}

/** Phones that record in high dynamic range look washed out on ordinary screens unless their tones are mapped. */
function toOrdinaryColours(probe: ProbeResult): string {
  if (!['smpte2084', 'arib-std-b67'].includes(probe.video!.colorTransfer ?? '')) return ''
  return ',zscale=t=linear:npl=100,format=gbrpf32le,zscale=p=bt709,tonemap=hable:desat=0,zscale=t=bt709:m=bt709:r=tv'
}

function soundArgs(probe: ProbeResult, plan: ProxyPlan): string[] {
  // A copy keeps the source's own times, so it only fits where the picture is copied or starts at zero as well.
  const timesKept = plan === 'remux' || !probe.proxyReasons.some(reason => reason === 'start-time' || reason === 'edit-list')
  const { codec, channels } = probe.audio!
  if (codec === 'aac' && timesKept) return ['-c:a', 'copy']
  return ['-c:a', 'aac', '-b:a', channels === 1 ? '96k' : '160k', '-ac', String(Math.min(2, Math.max(1, channels))), '-af', 'aresample=async=1:first_pts=0']
}

/** @throws ClipFault */
async function refuseFullDisk(outPath: string, needed: number) {
  const disk = await statfs(dirname(outPath))
  if (disk.bavail * disk.bsize < needed + 100_000_000) throw clipFault('out-of-space')
}

/** ffmpeg ends well even when it gave up half way through damaged data, or at its limit of bytes. @throws ClipFault */
async function refuseShort(outPath: string, probe: ProbeResult, signal?: AbortSignal) {
  const made = await probeClip(outPath, { signal })
  const missingMs = probe.durationMs - made.durationMs
  if (missingMs > Math.max(2000, probe.durationMs * 0.02)) {
    throw clipFault('damaged', `only the first ${Math.round(made.durationMs / 1000)} s of ${Math.round(probe.durationMs / 1000)} s could be decoded`)
  }
}
