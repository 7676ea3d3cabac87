import { open } from 'node:fs/promises'
import type { ProbeResult } from '#shared/types/media'
import { clipFault, faultOf } from './faults'
import { readMp4Layout } from './mp4Boxes'
import type { Mp4Layout } from './mp4Boxes'
import { scanPackets } from './packetScan'
import type { PacketScan } from './packetScan'
import { describeAudio, describeVideo, isPicture, readDevice, readRecordedAt } from './probeFields'
import type { ProbedFormat, ProbedStream } from './probeFields'
import { decideProxy } from './proxyReasons'
import { MAX_PIXELS, RunError, runFfmpeg, runFfprobe, inputLimits, localFile } from './run'
import { refuseByHead } from './sniff'

export interface ProbeOptions {
  /** Size of the upload; a local copy of another size means that fetching it went wrong. */
  sizeBytes?: number
  signal?: AbortSignal
}

/** Containers whose stated length can be trusted enough to notice that the end is missing. */
const LENGTH_KNOWN = /mov|matroska|avi/

/**
 * Finds out what a clip is, without decoding more than a few pictures.
 * @param path absolute path of a local file, whatever its name says it is
 * @throws ClipFault for a clip that cannot be used, with a message for its owner
 * @throws other errors (aborted, disk) that are worth another try
 */
export async function probeClip(path: string, options: ProbeOptions = {}): Promise<ProbeResult> {
  const { size, layout } = await readHead(path, options)
  const timeoutMs = 60_000 + size / 10_000
  try {
    const { format, streams } = await describe(path, { ...options, timeoutMs: 60_000 })
    const picture = streams.find(isPicture)
    const sound = streams.find(stream => stream.codec_type === 'audio')
    if (!picture && !sound) throw clipFault('not-a-video', nothingInside(streams))
    refuseSize(picture)
    const durationS = positive(format.duration)
    const scan = await scanPackets(path, { videoIndex: picture?.index ?? null, durationS, sizeBytes: size }, { ...options, timeoutMs })
    refuseCut(format, scan)
    return assemble({ format, streams, picture, sound, scan, layout, size })
  }
  catch (error) {
    throw faultOf(error, 'not-a-video', layout !== null)
  }
}

/**
 * Reads one text subtitle track of a clip as WebVTT.
 * @param streamIndex `index` of an entry of `ProbeResult.subtitles`
 * @throws ClipFault when the track cannot be read, e.g. because it holds pictures instead of text
 */
export async function extractSubtitles(path: string, streamIndex: number, options: { signal?: AbortSignal } = {}): Promise<Buffer> {
  try {
    const { stdout } = await runFfmpeg(
      [...inputLimits(), '-i', localFile(path), '-map', `0:${streamIndex}`, '-f', 'webvtt', 'pipe:1'],
      { ...options, timeoutMs: 600_000, maxStdoutBytes: 32 * 1024 ** 2 },
    )
    return stdout
  }
  catch (error) {
    throw faultOf(error, 'damaged')
  }
}

async function readHead(path: string, options: ProbeOptions): Promise<{ size: number, layout: Mp4Layout | null }> {
  const file = await open(path, 'r')
  try {
    const { size } = await file.stat()
    if (size === 0) throw clipFault('empty-file')
    if (options.sizeBytes !== undefined && options.sizeBytes !== size) {
      throw new Error(`The local copy has ${size} bytes, the upload ${options.sizeBytes}: fetch it again.`)
    }
    const head = Buffer.alloc(4096)
    const { bytesRead } = await file.read(head, 0, head.length, 0)
    refuseByHead(head.subarray(0, bytesRead))
    const layout = await readMp4Layout(file, size)
    refuseLayout(layout)
    return { size, layout }
  }
  finally {
    await file.close()
  }
}

/** @throws ClipFault for an MP4 whose end, or whose index, is missing */
function refuseLayout(layout: Mp4Layout | null) {
  if (!layout) return
  if (layout.missingBytes > 0) {
    throw clipFault('truncated', layout.hasIndex
      ? `${megabytes(layout.missingBytes)} are missing at its end`
      : 'its end is missing, and with it the index that cameras write last')
  }
  if (!layout.hasIndex && layout.hasMedia) {
    throw clipFault('truncated', 'the index that a camera writes at the end of a recording is missing')
  }
}

async function describe(path: string, options: { signal?: AbortSignal, timeoutMs: number }) {
  const { stdout, stderr } = await runFfprobe(path, ['-show_format', '-show_streams', '-of', 'json'], options)
  const found = JSON.parse(stdout.toString('utf8')) as { format?: ProbedFormat, streams?: ProbedStream[] }
  if (!found.format) throw new RunError('failed', 'ffprobe', stderr)
  return { format: found.format, streams: found.streams ?? [] }
}

/** @throws ClipFault */
function refuseSize(picture: ProbedStream | undefined) {
  if (!picture) return
  const width = picture.width ?? 0
  const height = picture.height ?? 0
  if (width * height > MAX_PIXELS) throw clipFault('picture-too-large', `${width} × ${height}`)
  // ffprobe decodes the first pictures to learn how their colours are stored.
  if (width < 2 || height < 2 || !picture.pix_fmt) throw clipFault('damaged', 'no picture in it can be decoded')
}

/** @throws ClipFault when data ends well before the length that the container states */
function refuseCut(format: ProbedFormat, scan: PacketScan) {
  if (scan.end === null) throw clipFault('no-duration')
  if (scan.endsEarly) throw clipFault('truncated', 'its data ends in the middle of a picture or sound')
  const stated = positive(format.duration)
  if (stated === null || !LENGTH_KNOWN.test(format.format_name)) return
  const missing = stated - Math.max(scan.end, scan.end - start(format))
  if (missing > Math.max(2, stated * 0.02)) {
    throw clipFault('truncated', `it should last ${seconds(stated)}, but its data ends after ${seconds(stated - missing)}`)
  }
}

interface Parts {
  format: ProbedFormat
  streams: ProbedStream[]
  picture: ProbedStream | undefined
  sound: ProbedStream | undefined
  scan: PacketScan
  layout: Mp4Layout | null
  size: number
}

function assemble({ format, streams, picture, sound, scan, layout, size }: Parts): ProbeResult {
  const startS = start(format)
  const durationMs = Math.round((scan.end! - startS) * 1000)
  if (durationMs <= 0) throw clipFault('no-duration')
  const video = picture ? describeVideo(picture, scan, layout?.hasEditList ?? false) : null
  const audio = sound ? describeAudio(sound) : null
  const facts = {
    container: format.format_name,
    durationMs,
    sizeBytes: size,
    video,
    audio,
    subtitles: streams.filter(stream => stream.codec_type === 'subtitle' && stream.codec_name)
      .map(stream => ({ index: stream.index, codec: stream.codec_name!, language: stream.tags?.language ?? null })),
    recordedAt: readRecordedAt(format.tags ?? {}, picture?.tags ?? {}),
    device: readDevice(format.tags ?? {}),
    fastStart: layout ? layout.fastStart : true,
  }
  return { ...facts, ...decideProxy(facts, { startS, streams }) }
}

function nothingInside(streams: ProbedStream[]): string {
  if (streams.some(stream => stream.disposition?.attached_pic)) return 'it holds a still picture only'
  return streams.length ? 'it holds neither picture nor sound' : 'nothing in it can be played'
}

function start(format: ProbedFormat): number {
  const value = Number.parseFloat(format.start_time ?? '')
  return Number.isFinite(value) ? value : 0
}

function positive(value: string | undefined): number | null {
  const number = Number.parseFloat(value ?? '')
  return number > 0 ? number : null
}

function megabytes(bytes: number): string {
  return bytes < 1_000_000 ? `${Math.ceil(bytes / 1000)} kB` : `${(bytes / 1_000_000).toFixed(1)} MB`
}

function seconds(value: number): string {
  return value < 90 ? `${value.toFixed(1)} s` : `${Math.floor(value / 60)} min ${Math.round(value % 60)} s`
}
