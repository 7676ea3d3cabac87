import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Resvg } from '@resvg/resvg-js'
import sharp from 'sharp'
import { scenes } from './scenes'
import { fromFurtherOff, mixClip, wavFile } from './sound'
import { RATE, type Samples } from './speech'
import type { TimedClip } from './times'

const FPS = 10
/** A keyframe every two seconds, so that the pages can jump about in it. */
const GOP = FPS * 2

/** Draws a clip frame by frame, adds its sound and writes the finished MP4 into the folder. */
export async function filmClip(timed: TimedClip, all: TimedClip[], folder: string, log = console.log): Promise<void> {
  const { clip, timeline } = timed
  const work = await mkdtemp(join(tmpdir(), 'ribband-demo-'))
  try {
    const wav = join(work, 'sound.wav')
    await writeFile(wav, wavFile(soundOf(timed, all)))
    const upright = join(work, 'picture.mp4')
    const frames = Math.ceil(timeline.durationMs / 1000 * FPS)
    const encoder = startEncoder(timed, wav, upright)
    let drawn = 0
    let last: { svg: string, pixels: Buffer } = { svg: '', pixels: Buffer.alloc(0) }
    for (let frame = 0; frame < frames; frame++) {
      const svg = drawAt(timed, frame / FPS * 1000)
      if (svg !== last.svg) {
        last = { svg, pixels: await pixelsOf(svg, clip.camera.rotation) }
        drawn++
      }
      if (!encoder.stdin.write(last.pixels)) await once(encoder.stdin, 'drain')
    }
    encoder.stdin.end()
    await finished(encoder, 'ffmpeg')
    await finish(timed, upright, folder + clip.file)
    log(`${clip.file}: ${(timeline.durationMs / 1000).toFixed(1)} s, ${drawn} of ${frames} frames drawn`)
  }
  finally {
    await rm(work, { recursive: true, force: true })
  }
}

/** The picture of a clip at a time, as SVG. */
export function drawAt({ clip, timeline }: TimedClip, ms: number): string {
  const shot = timeline.shots.findLast(s => s.startMs <= ms)
  const scene = shot && scenes[shot.shot]
  if (!shot || !scene) throw new Error(`${clip.file}: no drawing for “${shot?.shot ?? 'the start'}”.`)
  const { width, height } = clip.camera
  return scene({ t: (ms - shot.startMs) / 1000, p: (ms - shot.startMs) / (shot.endMs - shot.startMs), view: { width, height } })
}

function soundOf(timed: TimedClip, all: TimedClip[]): Samples {
  const { clip } = timed
  if (!('hears' in clip)) return mixClip(timed)
  return fromFurtherOff(mixClip(all.find(other => other.clip.file === clip.hears)!), clip.fromMs, clip.lengthMs)
}

/** Raw pixels as the camera stores them: an upright phone stores its picture lying on its side. */
async function pixelsOf(svg: string, rotation: 0 | 90): Promise<Buffer> {
  const image = new Resvg(svg, { font: { loadSystemFonts: false } }).render()
  if (rotation === 0) return Buffer.from(image.pixels)
  return sharp(image.pixels, { raw: { width: image.width, height: image.height, channels: 4 } }).rotate(-90).raw().toBuffer()
}

function startEncoder({ clip }: TimedClip, wav: string, out: string) {
  const { width, height, rotation } = clip.camera
  const size = rotation === 90 ? `${height}x${width}` : `${width}x${height}`
  return spawn('ffmpeg', [
    '-nostdin', '-v', 'error', '-y',
    '-f', 'rawvideo', '-pix_fmt', 'rgba', '-s', size, '-r', String(FPS), '-i', 'pipe:0', '-i', wav,
    '-c:v', 'libx264', '-preset', 'veryslow', '-tune', 'animation', '-crf', '41', '-pix_fmt', 'yuv420p',
    '-g', String(GOP), '-keyint_min', String(GOP), '-sc_threshold', '0',
    '-af', 'highpass=f=70,lowpass=f=9000', '-c:a', 'aac', '-b:a', '24k', '-ar', String(RATE), '-ac', '1', out,
  ], { stdio: ['pipe', 'inherit', 'inherit'] })
}

/** Adds what a phone writes: when it was recorded, which way up, and the index in front. */
async function finish({ clip }: TimedClip, from: string, to: string): Promise<void> {
  // ffmpeg 5 counts this anticlockwise; a player turns the picture 90° clockwise.
  const turn = clip.camera.rotation === 90 ? ['-metadata:s:v:0', 'rotate=270'] : []
  const mux = spawn('ffmpeg', [
    '-nostdin', '-v', 'error', '-y', '-i', from, '-c', 'copy', '-map_metadata', '-1', '-fflags', '+bitexact',
    ...turn, '-metadata', `creation_time=${new Date(clip.recordedAt).toISOString()}`, '-movflags', '+faststart', to,
  ], { stdio: ['ignore', 'inherit', 'inherit'] })
  await finished(mux, 'ffmpeg')
}

async function finished(child: ReturnType<typeof spawn>, name: string): Promise<void> {
  const [code] = child.exitCode === null ? await once(child, 'close') as [number] : [child.exitCode]
  if (code !== 0) throw new Error(`${name} stopped with code ${code}.`)
}
