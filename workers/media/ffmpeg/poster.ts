import { join } from 'node:path'
import { fitInto, shrinkAndTurn } from './frames'
import type { Frame } from './frames'
import type { PassInput } from './passes'
import { decoderThreads, inputLimits, localFile, runFfmpeg } from './run'

const LONGEST_SIDE = 1280
/** Where a clip has usually got going. */
const FROM_SHARE = 0.1
const BLACK = 24
const WHITE = 240
/** Standard deviation of brightness below which a picture is one even tone. */
const FLAT = 10

/** Looks at the tiles going by for one that can stand for the clip: about a tenth in, not black, white or blank. */
export class PosterChooser {
  private fallback: { timeMs: number, spread: number } | null = null
  private chosen: number | null = null

  constructor(private readonly durationMs: number) {}

  take(frame: Frame) {
    if (this.chosen !== null) return
    const { mean, spread } = brightness(frame.rgb)
    if (!this.fallback || spread > this.fallback.spread) this.fallback = { timeMs: frame.timeMs, spread }
    const late = frame.timeMs >= this.durationMs * FROM_SHARE
    if (late && mean > BLACK && mean < WHITE && spread > FLAT) this.chosen = frame.timeMs
  }

  /** Time in ms of the picture to use. */
  choose(): number {
    return this.chosen ?? this.fallback?.timeMs ?? 0
  }
}

/** Decodes one picture and writes it as `poster.jpg`, at most 1280 on its longer side. */
export async function makePoster(input: PassInput, timeMs: number, outDir: string) {
  const { width, height } = fitInto(input.probe.video!, LONGEST_SIDE, LONGEST_SIDE)
  const file = 'poster.jpg'
  await runFfmpeg([
    // Half a millisecond early, because the rounded time may lie just after the picture that is meant.
    '-ss', Math.max(0, (timeMs - 0.5) / 1000).toFixed(4), ...decoderThreads(), '-noautorotate', ...inputLimits(), '-i', localFile(input.path),
    '-map', '0:V:0', '-frames:v', '1', '-vf', shrinkAndTurn(input.probe.video!, width, height),
    '-pix_fmt', 'yuvj420p', '-q:v', '3', '-map_metadata', '-1', '-f', 'mjpeg', localFile(join(outDir, file)),
  ], { signal: input.signal })
  return { file, width, height }
}

function brightness(rgb: Buffer): { mean: number, spread: number } {
  let sum = 0
  let squares = 0
  let count = 0
  // Every fourth pixel is plenty.
  for (let i = 0; i + 2 < rgb.length; i += 12) {
    const value = 0.299 * rgb[i]! + 0.587 * rgb[i + 1]! + 0.114 * rgb[i + 2]!
    sum += value
    squares += value * value
    count++
  }
  const mean = sum / count
  return { mean, spread: Math.sqrt(Math.max(0, squares / count - mean * mean)) }
}
