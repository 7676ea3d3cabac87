import { shrinkRoughly, TimedFrames, toTimedRgb } from './frames'
import { SMALL } from './passes'
import type { PassInput } from './passes'
import { decoderThreads, inputLimits, localFile, pipeName, runFfmpeg } from './run'
import { CutFinder, histogramOf, splitSuspects } from './scenes'
import type { Suspect } from './scenes'

/**
 * Finds the frame at which the scene changes between two keyframes by decoding what lies between, and drops suspects
 * that turn out to be movement.
 * Suspects beyond the budget are believed only when most of those looked at proved true, as in edited footage.
 * @param budgetMs footage that may be decoded in all
 * @returns times of cuts in ms, ascending
 */
export async function refineCuts(input: PassInput, suspects: readonly Suspect[], budgetMs: number): Promise<number[]> {
  const { look, unseenMs } = splitSuspects(suspects, budgetMs)
  const found: number[] = []
  let proved = 0
  for (const suspect of look) {
    const cuts = await cutsWithin(input, suspect)
    if (cuts.length) proved++
    found.push(...cuts)
  }
  if (proved > look.length / 2) found.push(...unseenMs)
  return [...new Set(found)].sort((a, b) => a - b)
}

async function cutsWithin(input: PassInput, { fromMs, toMs }: Suspect): Promise<number[]> {
  const cuts = new CutFinder()
  const startMs = Math.max(0, fromMs - 0.5)
  const small = new TimedFrames(SMALL.width * SMALL.height * 3, frame => cuts.take(frame.timeMs, histogramOf(frame.rgb)), startMs)
  await runFfmpeg([
    '-ss', (startMs / 1000).toFixed(4), '-t', ((toMs - fromMs + 20) / 1000).toFixed(3),
    '-skip_frame', 'noref', ...decoderThreads(), '-noautorotate', ...inputLimits(), '-i', localFile(input.path),
    '-map', '0:V:0', '-fps_mode', 'passthrough',
    '-vf', `${shrinkRoughly(input.probe.video!, SMALL.width, SMALL.height)},${toTimedRgb(pipeName(0))}`, '-f', 'rawvideo', 'pipe:1',
  ], { signal: input.signal, onStdout: small.pixels, extraPipes: [small.clock] })
  return cuts.finish()
}
