import type { FrameRate, ProbeResult } from '#shared/types/media'
import type { PacketScan } from './packetScan'

/** The parts of ffprobe's JSON that are read. Everything may be missing. */
export interface ProbedStream {
  index: number
  codec_type?: string
  codec_name?: string
  profile?: string
  pix_fmt?: string
  width?: number
  height?: number
  sample_aspect_ratio?: string
  avg_frame_rate?: string
  r_frame_rate?: string
  channels?: number
  sample_rate?: string
  color_transfer?: string
  disposition?: { attached_pic?: number }
  side_data_list?: { rotation?: number }[]
  tags?: Record<string, string>
}

export interface ProbedFormat {
  format_name: string
  start_time?: string
  duration?: string
  tags?: Record<string, string>
}

const COMMON_RATES: FrameRate[] = [
  [24000, 1001], [24, 1], [25, 1], [30000, 1001], [30, 1], [48, 1], [50, 1], [60000, 1001], [60, 1],
  [100, 1], [120000, 1001], [120, 1], [240000, 1001], [240, 1],
].map(([numerator, denominator]) => ({ numerator: numerator!, denominator: denominator! }))

/** A moving picture; cover art is a still that rides along. */
export function isPicture(stream: ProbedStream): boolean {
  return stream.codec_type === 'video' && !stream.disposition?.attached_pic && stream.codec_name !== undefined
}

export function describeVideo(stream: ProbedStream, scan: PacketScan, hasEditList: boolean): NonNullable<ProbeResult['video']> {
  const rotation = readRotation(stream)
  const width = shownWidth(stream)
  const height = stream.height ?? 0
  const turned = rotation === 90 || rotation === 270
  const variable = isVariable(scan.frameGaps)
  const keyframes = scan.keyframeGaps
  return {
    codec: stream.codec_name ?? 'unknown',
    profile: stream.profile ?? null,
    pixelFormat: stream.pix_fmt ?? null,
    width: turned ? height : width,
    height: turned ? width : height,
    rotation,
    frameRate: readFrameRate(stream, scan, variable),
    variableFrameRate: variable,
    startMs: Math.round((scan.videoStart ?? 0) * 1000),
    hasEditList,
    keyframeEveryMs: keyframes.length ? Math.round(keyframes[keyframes.length >> 1]! * 1000) : null,
    longestKeyframeGapMs: keyframes.length ? Math.round(keyframes.at(-1)! * 1000) : null,
    colorTransfer: stream.color_transfer ?? null,
  }
}

export function describeAudio(stream: ProbedStream): NonNullable<ProbeResult['audio']> {
  return {
    codec: stream.codec_name ?? 'unknown',
    channels: stream.channels ?? 0,
    sampleRate: Number(stream.sample_rate ?? 0),
  }
}

/** ffprobe counts anticlockwise (−90 for a phone held upright); players turn clockwise. */
function readRotation(stream: ProbedStream): number {
  const degrees = stream.side_data_list?.find(data => data.rotation !== undefined)?.rotation ?? 0
  return ((Math.round(-degrees / 90) * 90) % 360 + 360) % 360
}

/** Width on the screen: some cameras store pixels that are not square. */
function shownWidth(stream: ProbedStream): number {
  const [across, down] = (stream.sample_aspect_ratio ?? '1:1').split(':').map(Number)
  const ratio = across && down ? across / down : 1
  return Math.round((stream.width ?? 0) * (ratio > 0.1 && ratio < 10 ? ratio : 1))
}

/**
 * Phones round their times to a millisecond or so, which is no variable rate; a change of exposure time or a dropped
 * frame is. Variable: more than 2 % of the distances differ from the median by more than a fifth.
 */
function isVariable(frameGaps: number[]): boolean {
  const median = frameGaps[frameGaps.length >> 1]
  if (!median || frameGaps.length < 4) return false
  const odd = frameGaps.filter(gap => Math.abs(gap - median) > median / 5).length
  return odd > Math.max(1, frameGaps.length * 0.02)
}

/** The average rate as an exact fraction, a common rate when it is within 0.1 % of one. */
function readFrameRate(stream: ProbedStream, scan: PacketScan, variable: boolean): FrameRate {
  const stated = fraction(stream.avg_frame_rate) ?? fromGaps(scan.frameGaps) ?? fraction(stream.r_frame_rate)
  if (!stated) return { numerator: 25, denominator: 1 }
  if (variable) return stated
  const value = rate(stated)
  // 30 and 30000/1001 are 0.1 % apart, so the nearest has to win, not the first.
  const nearest = COMMON_RATES.reduce((best, one) => Math.abs(rate(one) - value) < Math.abs(rate(best) - value) ? one : best)
  return Math.abs(rate(nearest) - value) / value < 0.001 ? nearest : stated
}

function rate({ numerator, denominator }: FrameRate): number {
  return numerator / denominator
}

function fraction(text: string | undefined): FrameRate | null {
  const [numerator, denominator] = (text ?? '').split('/').map(Number)
  const value = numerator && denominator ? numerator / denominator : 0
  // Above 1000 it is a time base, not a rate.
  return value > 0 && value <= 1000 ? { numerator: numerator!, denominator: denominator! } : null
}

function fromGaps(frameGaps: number[]): FrameRate | null {
  const sum = frameGaps.reduce((a, b) => a + b, 0)
  return sum > 0 ? { numerator: Math.round(frameGaps.length / sum * 1000), denominator: 1000 } : null
}

/** QuickTime's own key has the zone of the place; MP4's is in UTC. Clocks that were never set say 1904 or 1970. */
export function readRecordedAt(...sources: Record<string, string>[]): string | null {
  for (const key of ['com.apple.quicktime.creationdate', 'creation_time', 'DATE_RECORDED', 'date']) {
    for (const tags of sources) {
      const text = tags[key]?.trim() ?? ''
      if (!/^\d{4}-\d\d-\d\d[T ]\d\d:\d\d/.test(text)) continue
      const iso = withZone(text.replace(' ', 'T'))
      const time = Date.parse(iso)
      if (Number.isFinite(time) && new Date(time).getUTCFullYear() >= 1995) return iso
    }
  }
  return null
}

function withZone(text: string): string {
  const zone = /([+-]\d\d):?(\d\d)$/.exec(text)
  if (zone) return `${text.slice(0, zone.index)}${zone[1]}:${zone[2]}`
  return /Z$/i.test(text) ? text : `${text}Z`
}

export function readDevice(tags: Record<string, string>): string | null {
  const maker = tags['com.apple.quicktime.make'] ?? tags['com.android.manufacturer'] ?? tags.make ?? ''
  const model = tags['com.apple.quicktime.model'] ?? tags['com.android.model'] ?? tags.model ?? ''
  const name = (model.startsWith(maker) ? model : `${maker} ${model}`).replace(/[\p{Cc}\p{Cf}]+/gu, ' ').replace(/\s+/g, ' ').trim()
  return name ? name.slice(0, 100) : null
}
