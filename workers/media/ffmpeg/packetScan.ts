import { runFfprobe } from './run'
import type { RunOptions } from './run'

/** What the packets of a clip say without decoding any. Times in seconds on the container's clock. */
export interface PacketScan {
  /** First picture in order of showing; null without pictures. */
  videoStart: number | null
  /** End of the last packet of any track that was read; null when there was none. */
  end: number | null
  packets: number
  /** Distances between neighbouring pictures, ascending. */
  frameGaps: number[]
  /** Distances between neighbouring keyframes, ascending. */
  keyframeGaps: number[]
  /** ffprobe found the file to end before its data does. */
  endsEarly: boolean
}

/** Files up to this size are read whole (about a second from disk); larger ones in samples. */
const WHOLE_BYTES = 2 * 1024 ** 3
/** No interval between pictures of a film is this long, so a jump of this size separates two samples. */
const SAMPLE_JUMP_S = 20

/**
 * Lists packets of a clip: all of them, or for a very large file the first 60 s, 60 s from the middle and the last
 * 20 s, so that a 50 GB clip is not read twice.
 * @param durationS what the container claims, or null when it claims nothing
 * @throws RunError
 */
export async function scanPackets(
  path: string,
  source: { videoIndex: number | null, durationS: number | null, sizeBytes: number },
  options: Pick<RunOptions, 'signal' | 'timeoutMs'> = {},
): Promise<PacketScan> {
  const { durationS } = source
  const sampled = source.sizeBytes > WHOLE_BYTES && durationS !== null && durationS > 300
  const intervals = sampled
    ? ['-read_intervals', `%+60,${(durationS / 2).toFixed(3)}%+60,${(durationS - 20).toFixed(3)}%`]
    : []
  const reader = new PacketReader(source.videoIndex)
  const { stderr } = await runFfprobe(
    path,
    [...intervals, '-show_entries', 'packet=stream_index,pts_time,dts_time,duration_time,flags', '-of', 'csv=p=0'],
    { ...options, onStdout: chunk => reader.take(chunk) },
  )
  return {
    ...reader.finish(sampled),
    endsEarly: /partial file|File ended prematurely|Truncat/i.test(stderr),
  }
}

/** Reads ffprobe's lines `stream,pts,dts,duration,flags` as they come. */
class PacketReader {
  private rest = ''
  private end = -Infinity
  private packets = 0
  private readonly pictures: number[] = []
  private readonly keyframes: number[] = []

  constructor(private readonly videoIndex: number | null) {}

  take(chunk: Buffer) {
    const lines = (this.rest + chunk.toString('latin1')).split('\n')
    this.rest = lines.pop() ?? ''
    for (const line of lines) this.packet(line)
  }

  private packet(line: string) {
    const [stream, pts, dts, duration, flags] = line.split(',')
    // D: not shown, because an edit list cuts it off.
    if (flags === undefined || flags.includes('D')) return
    const time = Number.parseFloat(pts === 'N/A' ? dts! : pts!)
    if (!Number.isFinite(time)) return
    this.packets++
    this.end = Math.max(this.end, time + (Number.parseFloat(duration!) || 0))
    if (Number(stream) !== this.videoIndex) return
    this.pictures.push(time)
    if (flags.includes('K')) this.keyframes.push(time)
  }

  finish(sampled: boolean) {
    if (this.rest) this.packet(this.rest)
    const pictures = this.pictures.sort((a, b) => a - b)
    return {
      videoStart: pictures[0] ?? null,
      end: this.packets ? this.end : null,
      packets: this.packets,
      frameGaps: gaps(pictures).filter(gap => !sampled || gap < SAMPLE_JUMP_S),
      keyframeGaps: this.keyframeGaps(pictures, sampled),
    }
  }

  /** A stretch that holds a single keyframe still says that keyframes are at least that far apart. */
  private keyframeGaps(pictures: number[], sampled: boolean): number[] {
    const keyframes = this.keyframes.sort((a, b) => a - b)
    if (!sampled) return gaps(keyframes)
    const found: number[] = []
    let from = 0
    for (let i = 1; i <= pictures.length; i++) {
      if (i < pictures.length && pictures[i]! - pictures[i - 1]! < SAMPLE_JUMP_S) continue
      const stretch = keyframes.filter(time => time >= pictures[from]! && time <= pictures[i - 1]!)
      found.push(...stretch.length > 1 ? gaps(stretch) : [pictures[i - 1]! - pictures[from]!])
      from = i
    }
    return found.sort((a, b) => a - b)
  }
}

function gaps(times: number[]): number[] {
  return times.slice(1).map((time, i) => time - times[i]!).sort((a, b) => a - b)
}
