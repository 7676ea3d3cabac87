import { mkdir, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { FootageIndex, PictureSheets, ProbeResult, Span } from '#shared/types/media'
import { clipFault, faultOf } from './faults'
import { RunError } from './run'
import { passEveryFrame, passKeyframes, passSound } from './passes'
import type { PassInput } from './passes'
import { makePoster, PosterChooser } from './poster'
import { refineCuts } from './refineCuts'
import { CutFinder, histogramOf, SuspectFinder } from './scenes'
import { SheetMaker } from './sheets'
import { findSilences, PEAKS_PER_SECOND, SoundReducer } from './sound'

/** A footage index whose images and peaks are files in a folder; the job uploads them and swaps names for keys. */
export interface LocalFootage {
  poster: { file: string, width: number, height: number } | null
  /** `images` are file names. */
  sheets: PictureSheets | null
  peaks: { perSecond: number, count: number, file: string } | null
  sceneChangesMs: number[]
  silences: Span[]
  method: FootageIndex['method']
}

export interface IndexOptions {
  /** Folder for the images and the peaks; made when it is missing. */
  outDir: string
  signal?: AbortSignal
  /** Called with the share that is done, 0 – 1. */
  onProgress?: (share: number) => void
}

/** Up to this distance keyframes alone make the index. */
const CLOSE_KEYFRAMES_MS = 2000
/** Two tiles: a longer stretch without a keyframe would show the same picture too often. */
const LONGEST_GAP_MS = 10_000
/** Footage that may be decoded to find the exact frame of a cut, as a share of the clip. */
const REFINE_SHARE = 0.08
/** Short clips may always be looked at this far. */
const REFINE_AT_LEAST_MS = 6000

/**
 * Makes everything that the page needs to draw a clip: poster, picture sheets, sound peaks, scene changes, silences.
 * Where keyframes come every 2 s or oftener only they are decoded (a tenth of the work or less); otherwise everything
 * is made from one decode.
 * @param path absolute path of a local file that `probe` describes
 * @throws ClipFault when nothing in it can be decoded; other errors are worth another try
 */
export async function indexFootage(path: string, probe: ProbeResult, options: IndexOptions): Promise<LocalFootage> {
  await mkdir(options.outDir, { recursive: true })
  try {
    const footage = await make(path, probe, options)
    options.onProgress?.(1)
    return footage
  }
  catch (error) {
    throw faultOf(error)
  }
}

/**
 * True when keyframes alone are close enough to index a clip. Where they are not but a proxy is encoded anyway, indexing
 * the proxy is cheaper: 0.7 of the work of both. Times agree, because both begin at the first moment of the clip.
 */
export function keyframesSuffice(probe: ProbeResult): boolean {
  const every = probe.video?.keyframeEveryMs ?? null
  return every !== null && every <= CLOSE_KEYFRAMES_MS && (probe.video?.longestKeyframeGapMs ?? every) <= LONGEST_GAP_MS
}

async function make(path: string, probe: ProbeResult, options: IndexOptions): Promise<LocalFootage> {
  if (!probe.video) return fromSound(path, probe, options)
  if (!keyframesSuffice(probe)) return fromFrames(path, probe, options)
  try {
    return await fromKeyframes(path, probe, options)
  }
  catch (error) {
    // Some containers (old AVI) carry no usable times for copied packets. Decoding everything still works.
    if (error instanceof RunError && error.reason === 'failed') return fromFrames(path, probe, options)
    throw error
  }
}

async function fromKeyframes(path: string, probe: ProbeResult, options: IndexOptions): Promise<LocalFootage> {
  const { sheets, posters, sound, input } = begin(path, probe, options)
  const suspects = new SuspectFinder()
  const frames = await passKeyframes(input, {
    tile: sheets.tile,
    onTile(frame) {
      const histogram = histogramOf(frame.rgb)
      suspects.take(frame.timeMs, histogram)
      posters.take(frame)
      sheets.take(frame)
    },
    onSound: chunk => sound?.take(chunk),
  })
  if (frames === 0) throw new RunError('failed', 'ffmpeg', 'no keyframe could be decoded')
  const sceneChangesMs = await refineCuts(input, suspects.suspects, Math.max(REFINE_AT_LEAST_MS, probe.durationMs * REFINE_SHARE))
  return finish('keyframes', { sheets, posters, sound, input, sceneChangesMs }, options)
}

async function fromFrames(path: string, probe: ProbeResult, options: IndexOptions): Promise<LocalFootage> {
  const { sheets, posters, sound, input } = begin(path, probe, options)
  const cuts = new CutFinder()
  const frames = await passEveryFrame(input, {
    tile: sheets.tile,
    intervalMs: sheets.intervalMs,
    onTile(frame) {
      posters.take(frame)
      sheets.take(frame)
    },
    onSmall: frame => cuts.take(frame.timeMs, histogramOf(frame.rgb)),
    onSound: chunk => sound?.take(chunk),
  })
  if (frames === 0) throw clipFault('damaged', 'no picture in it can be decoded')
  return finish('frames', { sheets, posters, sound, input, sceneChangesMs: cuts.finish() }, options)
}

async function fromSound(path: string, probe: ProbeResult, options: IndexOptions): Promise<LocalFootage> {
  const sound = new SoundReducer(probe.audio!.sampleRate)
  await passSound({ path, probe, ...options }, chunk => sound.take(chunk))
  return { poster: null, sheets: null, sceneChangesMs: [], method: 'sound', ...await finishSound(sound, probe, options.outDir) }
}

function begin(path: string, probe: ProbeResult, options: IndexOptions) {
  return {
    sheets: new SheetMaker(probe, options.outDir, options.signal),
    posters: new PosterChooser(probe.durationMs),
    sound: probe.audio ? new SoundReducer(probe.audio.sampleRate) : null,
    input: { path, probe, signal: options.signal, onProgress: options.onProgress } satisfies PassInput,
  }
}

type Made = ReturnType<typeof begin> & { sceneChangesMs: number[] }

async function finish(method: LocalFootage['method'], made: Made, options: IndexOptions): Promise<LocalFootage> {
  return {
    poster: await makePoster(made.input, made.posters.choose(), options.outDir),
    sheets: await made.sheets.finish(),
    sceneChangesMs: made.sceneChangesMs,
    method,
    ...await finishSound(made.sound, made.input.probe, options.outDir),
  }
}

async function finishSound(sound: SoundReducer | null, probe: ProbeResult, outDir: string): Promise<Pick<LocalFootage, 'peaks' | 'silences'>> {
  if (!sound) return { peaks: null, silences: [] }
  // Codecs fill their last packet up with silence that is not part of the clip.
  const { peaks, loudnessDb } = sound.finish(Math.ceil(probe.durationMs / 1000 * PEAKS_PER_SECOND))
  const file = 'peaks.u8'
  await writeFile(join(outDir, file), peaks)
  return { peaks: { perSecond: PEAKS_PER_SECOND, count: peaks.length, file }, silences: findSilences(loudnessDb) }
}
