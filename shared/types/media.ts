/** What the media worker found out about a clip. All times are integer milliseconds from the clip's first frame. */

/** A frame rate kept as an exact fraction: 29.97 is 30000/1001. */
export interface FrameRate { numerator: number, denominator: number }

/** What `probe-clip` learned, stored with the clip. */
export interface ProbeResult {
  /** ffprobe's list of container names, e.g. `mov,mp4,m4a,3gp,3g2,mj2`. */
  container: string
  durationMs: number
  sizeBytes: number
  video: null | {
    codec: string
    profile: string | null
    pixelFormat: string | null
    /** As shown: rotation is already applied. */
    width: number
    height: number
    /** Degrees clockwise that a player turns the picture: 0, 90, 180 or 270. */
    rotation: number
    /** The average rate; frame numbers in exports come from this. */
    frameRate: FrameRate
    variableFrameRate: boolean
    /** First video frame on the container's clock; not 0 needs a proxy. */
    startMs: number
    hasEditList: boolean
    /** Median distance of keyframes; null when there is only one. */
    keyframeEveryMs: number | null
    /** Longest stretch without a keyframe that was seen; missing or null as above. */
    longestKeyframeGapMs?: number | null
    /** ffprobe's name of the transfer curve (`bt709`, `smpte2084`, `arib-std-b67` …), when the file states it. */
    colorTransfer?: string | null
  }
  audio: null | { codec: string, channels: number, sampleRate: number }
  subtitles: { index: number, codec: string, language: string | null }[]
  /** Creation time written in the container, ISO 8601 with zone, or null. */
  recordedAt: string | null
  /** Camera make and model if the container names it. */
  device: string | null
  /** True when the index of an MP4/MOV stands before its media data. */
  fastStart: boolean
  /** Why the browser cannot play or promptly seek the original; empty when it can. */
  proxyReasons: ProxyReason[]
  /** Things worth telling the builder, in words, that did not stop the clip. */
  warnings: string[]
}

export type ProxyReason = 'video-codec' | 'audio-codec' | 'container' | 'pixel-format' | 'long-gop' | 'not-fast-start' | 'start-time' | 'variable-rate' | 'edit-list'

/** Pictures of a clip in a grid of equal tiles, some images of up to columns × rows tiles. */
export interface PictureSheets {
  /** Tile n shows the frame at n × intervalMs, or the keyframe nearest before or after it. */
  intervalMs: number
  tileWidth: number
  tileHeight: number
  columns: number
  rows: number
  /** Number of tiles in all. */
  count: number
  /** True time of each tile's frame, when it came from a keyframe. Length = count. */
  timesMs: number[]
  /** Object keys, in order. */
  images: string[]
}

/** Loudness of the sound for drawing: one unsigned byte (0 silent – 255 full scale peak) per 1/perSecond s. */
export interface SoundPeaks { perSecond: number, count: number, key: string }

export interface Span { startMs: number, endMs: number }

/** What `index-footage` produced, stored with the clip. */
export interface FootageIndex {
  poster: { key: string, width: number, height: number } | null
  sheets: PictureSheets | null
  peaks: SoundPeaks | null
  /** Times where the picture changes abruptly. */
  sceneChangesMs: number[]
  silences: Span[]
  /** `keyframes` when only keyframes were decoded, `frames` for one full decode, `sound` for a clip without picture. */
  method: 'keyframes' | 'frames' | 'sound'
}

/** Every way a clip can fail, each with its own message for people. */
export type ClipFailureCode
  = 'empty-file' | 'not-a-video' | 'truncated' | 'too-many-streams' | 'picture-too-large' | 'forbidden-format'
  | 'no-duration' | 'timed-out' | 'out-of-space' | 'missing-object' | 'damaged' | 'internal'

export interface ClipFailure {
  code: ClipFailureCode
  /** What happened, what was kept, what to do; plain words. */
  message: string
}
