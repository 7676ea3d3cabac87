import { execa } from 'execa'
import { access, mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { makeProxy, planProxy } from '../../../../../workers/media/ffmpeg/makeProxy'
import { probeClip } from '../../../../../workers/media/ffmpeg/probe'
import { makeClip } from '../../../../support/clips'
import type { ClipKind } from '../../../../support/clips'
import { brightnessGrid, readFrameNumber } from '../../../../support/pictures'

let folder: string
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'ribband-proxy-'))
})
afterAll(() => rm(folder, { recursive: true }))

async function proxy(kind: ClipKind) {
  const path = await makeClip(kind)
  const before = await probeClip(path)
  const out = join(folder, `${kind}.mp4`)
  await makeProxy(path, before, out)
  return { before, after: await probeClip(out), out, plan: planProxy(before) }
}

vi.setConfig({ testTimeout: 120_000 })

describe('makeProxy', () => {
  it.each([
    'index-last', 'matroska', 'variable-rate', 'late-start', 'edit-list', 'hevc', 'ten-bit', 'hdr', 'old-avi', 'camcorder', 'long-gop', 'numbered-keyframes-only',
  ] as const)('makes a copy of %s that browsers play and seek, of the same length', async (kind) => {
    const { before, after } = await proxy(kind)
    expect(after.proxyReasons).toEqual([])
    expect(after).toMatchObject({ fastStart: true, recordedAt: null, device: null })
    expect(after.video).toMatchObject({ codec: 'h264', pixelFormat: 'yuv420p', width: before.video!.width, height: before.video!.height, rotation: 0, variableFrameRate: false })
    // One frame, and for sound one packet of AAC (21 ms).
    const frameMs = 1000 * before.video!.frameRate.denominator / before.video!.frameRate.numerator
    expect(Math.abs(after.durationMs - before.durationMs)).toBeLessThanOrEqual(Math.ceil(frameMs) + 22)
    if (before.audio) expect(after.audio?.codec).toBe('aac')
  })

  it('copies instead of encoding when only the wrapping is wrong', async () => {
    const { plan, before, after } = await proxy('index-last')
    expect(plan).toBe('remux')
    expect(after.video).toEqual(before.video)
  })

  it('turns upright clips instead of passing the note on', async () => {
    const path = await makeClip('rotated')
    const probe = { ...await probeClip(path), proxyReasons: ['long-gop' as const] }
    const out = join(folder, 'upright.mp4')
    await makeProxy(path, probe, out)
    expect((await probeClip(out)).video).toMatchObject({ width: 180, height: 320, rotation: 0 })
  })

  it('shows the same frame at the same time', async () => {
    const { out } = await proxy('numbered-long-gop')
    for (const frame of [0, 7, 299, 500]) {
      const at = ((frame + 0.5) * 1001 / 30_000).toFixed(4)
      const [row] = await brightnessGrid(out, 16, 1, ['-ss', String(Math.max(0, Number(at) - 1001 / 30_000))])
      expect(readFrameNumber(row!)).toBe(frame)
    }
  })

  it('writes nothing of where and with what a clip was recorded', async () => {
    const { out } = await proxy('index-last')
    const { stdout } = await execa('ffprobe', ['-v', 'error', '-show_entries', 'format_tags', '-of', 'json', out])
    expect(stdout).not.toMatch(/creation_time|location|make|model/)
  })

  it('leaves nothing behind when it is stopped', async () => {
    const path = await makeClip('hevc')
    const out = join(folder, 'stopped.mp4')
    await expect(makeProxy(path, await probeClip(path), out, { signal: AbortSignal.abort(new Error('cancelled')) })).rejects.toThrow('cancelled')
    await expect(access(out)).rejects.toThrow()
  })
})
