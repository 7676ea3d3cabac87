import { execa } from 'execa'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { indexFootage } from '../../workers/media/ffmpeg/indexFootage'
import { probeClip } from '../../workers/media/ffmpeg/probe'
import { makeClip } from '../support/clips'
import type { ClipKind } from '../support/clips'
import { readSheet } from '../support/pictures'

/*
 * Source: ffprobe (FFmpeg 5.1 of Debian 12), asked separately and with other options than the product asks it; and the
 * pictures themselves, in which every frame spells its own number.
 */

vi.setConfig({ testTimeout: 120_000 })

let folder: string
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'ribband-check-'))
})
afterAll(() => rm(folder, { recursive: true }))

async function ffprobe(path: string, ...args: string[]): Promise<string[]> {
  const { stdout } = await execa('ffprobe', ['-v', 'error', ...args, '-of', 'default=nokey=1:noprint_wrappers=1', path])
  return stdout.split('\n').map(line => line.trim()).filter(line => line !== '')
}

describe('probe results against ffprobe', () => {
  it.each<ClipKind>(['good', 'numbered', 'numbered-long-gop', 'three-scenes', 'long-gop', 'hevc', 'ten-bit'])('%s', async (kind) => {
    const path = await makeClip(kind)
    const probe = await probeClip(path)
    const [duration] = await ffprobe(path, '-show_entries', 'format=duration')
    expect(Math.abs(probe.durationMs - Number(duration) * 1000)).toBeLessThanOrEqual(1)
    const [codec, width, height, format, rate] = await ffprobe(path, '-select_streams', 'v:0', '-show_entries', 'stream=codec_name,width,height,pix_fmt,r_frame_rate')
    expect(probe.video).toMatchObject({ codec, width: Number(width), height: Number(height), pixelFormat: format })
    expect(`${probe.video!.frameRate.numerator}/${probe.video!.frameRate.denominator}`).toBe(rate)
    // Decoded keyframes, not packet flags.
    const keyframes = (await ffprobe(path, '-select_streams', 'v:0', '-skip_frame', 'nokey', '-show_entries', 'frame=pts_time')).map(Number)
    const gaps = keyframes.slice(1).map((time, i) => time - keyframes[i]!).sort((a, b) => a - b)
    const median = gaps[gaps.length >> 1]
    expect(probe.video!.keyframeEveryMs).toBe(median === undefined ? null : Math.round(median * 1000))
  })
})

describe('picture sheets', () => {
  it.each<[ClipKind, 'keyframes' | 'frames', number]>([
    ['numbered', 'keyframes', 30],
    ['numbered-keyframes-only', 'keyframes', 30],
    ['numbered-long-gop', 'frames', 30_000 / 1001],
  ])('of %s show the frames whose times they state', async (kind, method, rate) => {
    const path = await makeClip(kind)
    const probe = await probeClip(path)
    const footage = await indexFootage(path, probe, { outDir: join(folder, kind) })
    expect(footage.method).toBe(method)
    const sheets = footage.sheets!
    const shown = await readSheet(join(folder, kind, sheets.images[0]!), sheets.columns, sheets.count)
    expect(shown).toEqual(sheets.timesMs.map(time => Math.round(time / 1000 * rate)))
    // ffprobe's own list of frames holds every one of these times.
    const frames = (await ffprobe(path, '-select_streams', 'v:0', '-show_entries', 'frame=pts_time')).map(time => Math.round(Number(time) * 1000))
    for (const time of sheets.timesMs) expect(frames.some(frame => Math.abs(frame - time) <= 1)).toBe(true)
    // And they are the nearest there are: a kept keyframe at most 2.2 s away, or with every frame decoded at most three frames.
    const nearest = method === 'frames' ? 3000 / rate + 1 : 1100
    sheets.timesMs.forEach((time, tile) => expect(Math.abs(time - tile * sheets.intervalMs)).toBeLessThanOrEqual(nearest))
  })
})
