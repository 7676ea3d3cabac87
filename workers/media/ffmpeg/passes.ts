import { PassThrough } from 'node:stream'
import type { ProbeResult } from '#shared/types/media'
import { shrinkAndTurn, shrinkRoughly, TimedFrames, toTimedRgb } from './frames'
import type { Frame } from './frames'
import { decoderThreads, inputLimits, localFile, pipeName, runFfmpeg } from './run'
import type { RunOptions, Sink } from './run'

/** What every way through a clip needs. */
export interface PassInput {
  path: string
  probe: ProbeResult
  signal?: AbortSignal
  onProgress?: (share: number) => void
}

type Size = { width: number, height: number }

/** Kept keyframes lie no further apart than this where the clip allows: a tile every 5 s needs no more. */
const KEYFRAME_SPACING_MS = 2200
/** Small enough to count the colours of every picture at next to no cost. */
export const SMALL: Size = { width: 64, height: 36 }

/**
 * Sends the keyframes of a clip through as tiles, and its sound.
 *
 * Two processes: the first copies keyframes out of the container, leaving out those that are closer than needed (some
 * cameras write keyframes only), and decodes the sound; the second decodes what came through. ffmpeg's own
 * `-discard nokey` is not used: in 5.1 it loses count of the shown-at times when a clip has B-frames. The deblocking
 * filter is skipped; nothing refers to these pictures and nobody sees it in a tile.
 * @returns how many pictures came
 */
export async function passKeyframes(
  input: PassInput,
  to: { tile: Size, onTile: (frame: Frame) => void, onSound: Sink },
): Promise<number> {
  const video = input.probe.video!
  const frames = progressing(input, to.tile, to.onTile)
  // Holds the first process back to the pace of the second: six hours of keyframes are gigabytes.
  const between = new PassThrough()
  // Either process failing ends the other.
  const stop = new AbortController()
  const options: RunOptions = { timeoutMs: timeLimit(input.probe), signal: anySignal(input.signal, stop.signal) }
  const every = keptOutOf(video.longestKeyframeGapMs ?? video.keyframeEveryMs ?? KEYFRAME_SPACING_MS)
  const copy = runFfmpeg([
    ...inputLimits(), '-i', localFile(input.path),
    '-map', '0:V:0', '-c', 'copy', '-bsf:v', `noise=drop='if(key\\,st(0\\,ld(0)+1)*0+mod(ld(0)-1\\,${every})\\,1)'`,
    '-avoid_negative_ts', 'disabled', '-f', 'matroska', 'pipe:1',
    ...input.probe.audio ? soundOutput(pipeName(0)) : [],
  ], { ...options, onStdout: between, extraPipes: [to.onSound] })
  const decode = runFfmpeg([
    '-copyts', '-skip_loop_filter', 'all', ...decoderThreads(), '-noautorotate', ...inputLimits(['matroska']), '-i', 'pipe:0',
    '-fps_mode', 'passthrough', '-vf', `${shrinkAndTurn(video, to.tile.width, to.tile.height)},${toTimedRgb(pipeName(0))}`,
    '-f', 'rawvideo', 'pipe:1',
  ], { ...options, stdin: between, onStdout: frames.pixels, extraPipes: [frames.clock] })
  await both(copy.finally(() => between.end()), decode, stop, input.signal)
  return frames.count
}

/**
 * Sends every picture of a clip through in one decode: small ones for colours, tiles at an interval, and the sound.
 * Pictures that no other depends on are left out (`noref`): on footage with B-frames that saves a third of the work
 * and moves a cut or a tile by two frames at most.
 * @returns how many tiles came
 */
export async function passEveryFrame(
  input: PassInput,
  to: { tile: Size, intervalMs: number, onTile: (frame: Frame) => void, onSmall: (frame: Frame) => void, onSound: Sink },
): Promise<number> {
  const video = input.probe.video!
  const tiles = progressing(input, to.tile, to.onTile)
  const small = new TimedFrames(bytes(SMALL), to.onSmall)
  // The first picture at or after every multiple of the interval; variable 0 is the next multiple.
  const interval = to.intervalMs / 1000
  const select = `select='if(gte(t\\,ld(0)*${interval})\\,st(0\\,floor(t/${interval})+1)\\,0)'`
  await runFfmpeg([
    '-skip_frame', 'noref', ...decoderThreads(), '-noautorotate', ...inputLimits(), '-i', localFile(input.path),
    '-map', '0:V:0', '-fps_mode', 'passthrough',
    '-vf', `${shrinkRoughly(video, SMALL.width, SMALL.height)},${toTimedRgb(pipeName(0))}`, '-f', 'rawvideo', 'pipe:1',
    '-map', '0:V:0', '-fps_mode', 'passthrough',
    '-vf', `${select},${shrinkAndTurn(video, to.tile.width, to.tile.height)},${toTimedRgb(pipeName(2))}`, '-f', 'rawvideo', pipeName(1),
    ...input.probe.audio ? soundOutput(pipeName(3)) : [],
  ], {
    signal: input.signal,
    timeoutMs: timeLimit(input.probe),
    onStdout: small.pixels,
    extraPipes: [small.clock, tiles.pixels, tiles.clock, to.onSound],
  })
  return tiles.count
}

/** Sends the sound of a clip through. */
export async function passSound(input: PassInput, onSound: Sink): Promise<void> {
  await runFfmpeg([...inputLimits(), '-i', localFile(input.path), ...soundOutput('pipe:1')], {
    signal: input.signal,
    timeoutMs: timeLimit(input.probe),
    onStdout: onSound,
    onProgress: positionMs => report(input, positionMs),
  })
}

/** Time to go through a clip: decoding runs faster than it plays on anything that should run a worker. */
export function timeLimit(probe: ProbeResult): number {
  return 5 * 60_000 + probe.durationMs * 3
}

/** Mono 16-bit at the clip's own rate, with silence put in where the container has none, so that position is time. */
function soundOutput(pipe: string): string[] {
  return ['-map', '0:a:0', '-af', 'aresample=async=1:first_pts=0', '-ac', '1', '-f', 's16le', '-flush_packets', '0', pipe]
}

function keptOutOf(gapMs: number): number {
  return Math.max(1, Math.floor(KEYFRAME_SPACING_MS / Math.max(1, gapMs)))
}

function progressing(input: PassInput, size: Size, onFrame: (frame: Frame) => void): TimedFrames {
  return new TimedFrames(bytes(size), (frame) => {
    onFrame(frame)
    report(input, frame.timeMs)
  })
}

/** The last twentieth is kept for poster, sheets and cuts. */
function report(input: PassInput, positionMs: number) {
  input.onProgress?.(Math.min(1, Math.max(0, positionMs / input.probe.durationMs)) * 0.95)
}

function bytes(size: Size): number {
  return size.width * size.height * 3
}

function anySignal(...signals: (AbortSignal | undefined)[]): AbortSignal {
  return AbortSignal.any(signals.filter(signal => signal !== undefined))
}

/** Waits for both; when one fails, ends the other and reports the one that failed first. */
async function both(a: Promise<unknown>, b: Promise<unknown>, stop: AbortController, outer: AbortSignal | undefined) {
  let first: unknown
  const guard = (promise: Promise<unknown>) => promise.catch((error: unknown) => {
    first ??= error
    stop.abort()
  })
  await Promise.all([guard(a), guard(b)])
  outer?.throwIfAborted()
  if (first) throw first
}
