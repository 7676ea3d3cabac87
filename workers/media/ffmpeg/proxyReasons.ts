import type { ProbeResult, ProxyReason } from '#shared/types/media'
import type { ProbedStream } from './probeFields'
import { isPicture } from './probeFields'

type Facts = Omit<ProbeResult, 'proxyReasons' | 'warnings'>

/** A seek decodes half a keyframe distance on average; at 3 s of 1080p30 it takes about half a second. */
const LONG_GOP_MS = 3000
const LONGEST_GAP_MS = 10_000
/** The same work as 3 s of 1080p30 between keyframes, so that 4K needs them closer. */
const MOST_PIXELS_PER_GOP = 1920 * 1080 * 90
/** Less than a frame or so on the container's clock does no harm. */
const START_TOLERANCE_S = 0.02
const PICTURE_START_TOLERANCE_MS = 100

const PLAYABLE_PIXELS = new Set(['yuv420p', 'yuvj420p'])
const MP4_SOUND = new Set(['aac', 'mp3'])
const WEBM_PICTURES = new Set(['vp8', 'vp9'])
const WEBM_SOUND = new Set(['opus', 'vorbis'])
/** Sound files that browsers play as they are, by container. */
const PLAIN_SOUND: [RegExp, RegExp][] = [
  [/^mov/, /^(aac|mp3)$/], [/^mp3$/, /^mp3$/], [/^wav$/, /^pcm_(u8|s16le|s24le|f32le)$/], [/^flac$/, /^flac$/], [/^matroska/, /^(opus|vorbis)$/],
]

/**
 * Decides whether browsers in ordinary use play a clip and find a moment in it promptly, from what is written in it.
 * It cannot be left to the browser: for HEVC some play the sound, show no picture and report no error.
 * @param more start on the container's clock in seconds, and all tracks as ffprobe lists them
 */
export function decideProxy(facts: Facts, more: { startS: number, streams: ProbedStream[] }): Pick<ProbeResult, 'proxyReasons' | 'warnings'> {
  const reasons = facts.video ? pictureReasons(facts, facts.video, more.startS) : soundReasons(facts, more.startS)
  return { proxyReasons: reasons, warnings: warningsFor(facts, more.streams, reasons) }
}

function pictureReasons(facts: Facts, video: NonNullable<Facts['video']>, startS: number): ProxyReason[] {
  const mp4 = facts.container.startsWith('mov')
  const webm = facts.container.startsWith('matroska') && WEBM_PICTURES.has(video.codec)
  const picturePlays = webm || video.codec === 'h264'
  const sound = facts.audio?.codec
  const soundPlays = sound === undefined || (webm ? WEBM_SOUND : MP4_SOUND).has(sound)
  return pick([
    ['video-codec', !picturePlays],
    ['pixel-format', picturePlays && !PLAYABLE_PIXELS.has(video.pixelFormat ?? '')],
    ['audio-codec', !soundPlays],
    ['container', !mp4 && !webm],
    ['not-fast-start', mp4 && !facts.fastStart],
    ['start-time', Math.abs(startS) > START_TOLERANCE_S || Math.abs(video.startMs - startS * 1000) > PICTURE_START_TOLERANCE_MS],
    ['edit-list', video.hasEditList],
    ['variable-rate', video.variableFrameRate],
    ['long-gop', isSlowToSeek(facts, video)],
  ])
}

function soundReasons(facts: Facts, startS: number): ProxyReason[] {
  const codec = facts.audio?.codec ?? ''
  const plain = PLAIN_SOUND.filter(([container]) => container.test(facts.container))
  return pick([
    ['audio-codec', plain.length > 0 && !plain.some(([, codecs]) => codecs.test(codec))],
    ['container', plain.length === 0],
    ['not-fast-start', facts.container.startsWith('mov') && !facts.fastStart],
    ['start-time', Math.abs(startS) > 0.1],
  ])
}

function isSlowToSeek(facts: Facts, video: NonNullable<Facts['video']>): boolean {
  // A single keyframe: the whole clip hangs on it.
  const every = video.keyframeEveryMs ?? facts.durationMs
  const framesPerGop = every / 1000 * video.frameRate.numerator / video.frameRate.denominator
  return every > LONG_GOP_MS
    || (video.longestKeyframeGapMs ?? 0) > LONGEST_GAP_MS
    || video.width * video.height * framesPerGop > MOST_PIXELS_PER_GOP
}

function warningsFor(facts: Facts, streams: ProbedStream[], reasons: ProxyReason[]): string[] {
  const { video } = facts
  const pictures = streams.filter(isPicture).length
  const sounds = streams.filter(stream => stream.codec_type === 'audio').length
  const sayings: [string, boolean][] = [
    ['This clip has sound only. It can be captioned and given chapters like any other.', !video],
    ['This clip has no sound.', !facts.audio],
    [`Browsers cannot show its picture (${video?.codec}), so a copy in H.264 is made for watching.`, reasons.includes('video-codec')],
    [`Browsers cannot show its colours (${video?.pixelFormat}), so a copy with ordinary colours is made for watching.`, reasons.includes('pixel-format')],
    [`Browsers cannot play its sound (${facts.audio?.codec}), so a copy with AAC sound is made for watching.`, reasons.includes('audio-codec')],
    ['Its pictures do not come at an even rate. The copy for watching has an even one.', reasons.includes('variable-rate')],
    ['Its container starts or cuts the recording at another time than zero. Times in Ribband count from the first moment it shows.', reasons.includes('start-time') || reasons.includes('edit-list')],
    [`It holds ${pictures} moving pictures; the first is used.`, pictures > 1],
    [`It holds ${sounds} sound tracks; the first is used.`, sounds > 1],
  ]
  return sayings.filter(([, applies]) => applies).map(([text]) => text)
}

function pick(list: [ProxyReason, boolean][]): ProxyReason[] {
  return list.filter(([, applies]) => applies).map(([reason]) => reason)
}
