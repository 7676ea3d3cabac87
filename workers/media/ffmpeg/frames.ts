import type { ProbeResult } from '#shared/types/media'
import type { Sink } from './run'

/** A small picture (RGB, 3 bytes a pixel) and when it is shown, in ms from the start of the clip. */
export interface Frame { timeMs: number, rgb: Buffer }

type Video = NonNullable<ProbeResult['video']>

/** Fits a clip's picture into a box without enlarging it. Even sizes, as encoders want them. */
export function fitInto(video: Pick<Video, 'width' | 'height'>, maxWidth: number, maxHeight: number): { width: number, height: number } {
  const factor = Math.min(maxWidth / video.width, maxHeight / video.height, 1)
  const even = (length: number) => Math.max(2, Math.round(length * factor / 2) * 2)
  return { width: even(video.width), height: even(video.height) }
}

/**
 * Filters that shrink and then turn the picture: turning a tile is nearly free, turning a full picture is not. Needs
 * `-noautorotate` before the input.
 */
export function shrinkAndTurn(video: Video, width: number, height: number, flags = 'area'): string {
  const sideways = video.rotation === 90 || video.rotation === 270
  const scale = sideways ? `scale=${height}:${width}` : `scale=${width}:${height}`
  const turn = { 90: ',transpose=clock', 180: ',hflip,vflip', 270: ',transpose=cclock' }[video.rotation] ?? ''
  return `${scale}:flags=${flags}${turn},setsar=1`
}

/** Shrinks by points first and evens out the rest: a tenth of the cost of `area` at full size, and noise averages out. */
export function shrinkRoughly(video: Video, width: number, height: number): string {
  const sideways = video.rotation === 90 || video.rotation === 270
  const [across, down] = sideways ? [height * 4, width * 4] : [width * 4, height * 4]
  return `scale=${across}:${down}:flags=neighbor,${shrinkAndTurn(video, width, height, 'area')}`
}

/**
 * Filters that end a chain of small pictures: raw RGB, and the time of each picture in microseconds on a pipe of its
 * own, because raw video carries none. (`metadata=print` only prints frames that have some, hence the mark.)
 */
export function toTimedRgb(timesPipe: string): string {
  return `format=rgb24,settb=AVTB,metadata=mode=add:key=ribband:value=1,metadata=mode=print:file=${timesPipe.replace(':', '\\\\:')}:direct=1`
}

/** Puts raw pictures from one pipe and their times from another together again, in order, keeping only what waits. */
export class TimedFrames {
  count = 0
  private readonly waiting: Buffer[] = []
  private readonly times: number[] = []
  private partial: Buffer
  private filled = 0
  private line = ''

  /** @param offsetMs time on the clip's clock at which the run begins */
  constructor(private readonly frameBytes: number, private readonly onFrame: (frame: Frame) => void, private readonly offsetMs = 0) {
    this.partial = Buffer.allocUnsafe(frameBytes)
  }

  readonly pixels: Sink = (chunk) => {
    for (let at = 0; at < chunk.length;) {
      const copied = chunk.copy(this.partial, this.filled, at)
      at += copied
      this.filled += copied
      if (this.filled < this.frameBytes) return
      this.waiting.push(this.partial)
      this.partial = Buffer.allocUnsafe(this.frameBytes)
      this.filled = 0
      this.pair()
    }
  }

  readonly clock: Sink = (chunk) => {
    const lines = (this.line + chunk.toString('latin1')).split('\n')
    this.line = lines.pop() ?? ''
    for (const line of lines) {
      const pts = /^frame:\d+\s+pts:(-?\d+)/.exec(line)
      if (pts) this.times.push(Math.round(this.offsetMs + Number(pts[1]) / 1000))
    }
    this.pair()
  }

  private pair() {
    while (this.waiting.length && this.times.length) {
      this.count++
      this.onFrame({ rgb: this.waiting.shift()!, timeMs: this.times.shift()! })
    }
  }
}
