import { copyFile, mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it, vi } from 'vitest'
import type { ClipFailureCode, ProxyReason } from '#shared/types/media'
import { ClipFault } from '../../../../../workers/media/ffmpeg/faults'
import { planProxy } from '../../../../../workers/media/ffmpeg/makeProxy'
import { extractSubtitles, probeClip } from '../../../../../workers/media/ffmpeg/probe'
import { makeClip } from '../../../../support/clips'
import type { ClipKind } from '../../../../support/clips'

vi.setConfig({ testTimeout: 120_000 })

describe('probeClip on clips that can be used', () => {
  it.each<[ClipKind, ProxyReason[], 'none' | 'remux' | 'encode']>([
    ['good', [], 'none'],
    ['index-last', ['not-fast-start'], 'remux'],
    ['rotated', [], 'none'],
    ['variable-rate', ['variable-rate'], 'encode'],
    ['late-start', ['container', 'start-time'], 'encode'],
    ['edit-list', ['edit-list'], 'encode'],
    ['hevc', ['video-codec'], 'encode'],
    ['ten-bit', ['pixel-format'], 'encode'],
    ['matroska', ['container'], 'remux'],
    ['webm', [], 'none'],
    ['old-avi', ['video-codec', 'container'], 'encode'],
    ['camcorder', ['audio-codec', 'container', 'start-time'], 'encode'],
    ['long-gop', ['long-gop'], 'encode'],
    ['audio-only', [], 'none'],
    ['cover-art', [], 'none'],
  ])('%s needs a copy because of %j: %s', async (kind, reasons, plan) => {
    const probe = await probeClip(await makeClip(kind))
    expect(probe.proxyReasons).toEqual(reasons)
    expect(planProxy(probe)).toBe(plan)
  })

  it('reads what a phone writes', async () => {
    const probe = await probeClip(await makeClip('good'))
    expect(probe).toMatchObject({ durationMs: 4000, recordedAt: '2024-05-11T14:03:20.000000Z', fastStart: true, warnings: [] })
    expect(probe.video).toMatchObject({ codec: 'h264', width: 320, height: 180, rotation: 0, frameRate: { numerator: 30, denominator: 1 }, startMs: 0, keyframeEveryMs: 500 })
    expect(probe.audio).toEqual({ codec: 'aac', channels: 1, sampleRate: 48_000 })
  })

  it('gives the size of an upright clip as it is shown', async () => {
    expect((await probeClip(await makeClip('rotated'))).video).toMatchObject({ width: 180, height: 320, rotation: 90 })
  })

  it('measures from the first moment when the container starts late', async () => {
    const probe = await probeClip(await makeClip('late-start'))
    expect(probe.video?.startMs).toBe(5000)
    expect(Math.abs(probe.durationMs - 3000)).toBeLessThan(50)
  })

  it.each(['audio-only', 'cover-art'] as const)('takes %s for a clip of sound only and says so', async (kind) => {
    const probe = await probeClip(await makeClip(kind))
    expect(probe.video).toBeNull()
    expect(probe.warnings.join()).toContain('sound only')
  })

  it('keeps 29.97 exact', async () => {
    expect((await probeClip(await makeClip('numbered-long-gop'))).video?.frameRate).toEqual({ numerator: 30_000, denominator: 1001 })
  })
})

describe('probeClip on clips that cannot be used', () => {
  it.each<[ClipKind, ClipFailureCode, RegExp]>([
    ['empty', 'empty-file', /holds no bytes/],
    ['text', 'not-a-video', /plain text/],
    ['zeros', 'not-a-video', /zeros only/],
    ['random-bytes', 'not-a-video', /not a video or sound file/],
    ['picture-named-mp4', 'not-a-video', /another kind/],
    ['no-index', 'truncated', /index that cameras write last/],
    ['cut-off', 'truncated', /are missing at its end/],
    ['cut-off-matroska', 'truncated', /cut short/],
    ['scrambled-pictures', 'damaged', /no picture in it can be decoded/],
    ['playlist-file', 'forbidden-format', /never opened/],
    ['playlist-http', 'forbidden-format', /never opened/],
    ['concat-list', 'forbidden-format', /never opened/],
    ['concat-list-plain', 'forbidden-format', /never opened/],
    ['dash-manifest', 'forbidden-format', /never opened/],
    ['many-streams', 'too-many-streams', /more than 16 tracks/],
    ['absurd-size', 'picture-too-large', /40 million pixels/],
  ])('%s: %s', async (kind, code, words) => {
    const error = await probeClip(await makeClip(kind)).catch((error: unknown) => error)
    expect(error).toBeInstanceOf(ClipFault)
    const { failure } = error as ClipFault
    expect(failure.code).toBe(code)
    expect(failure.message).toMatch(words)
    expect(failure.message).toMatch(/kept as uploaded|Nothing was lost/)
    expect(failure.message).toMatch(/[Uu]pload|Export|Ribband reads/)
  })

  it('takes a copy of the wrong size for a failed fetch, not for a bad clip', async () => {
    const error = await probeClip(await makeClip('good'), { sizeBytes: 5 }).catch((error: unknown) => error)
    expect(error).not.toBeInstanceOf(ClipFault)
    expect(String(error)).toMatch(/fetch it again/)
  })

  it('takes names literally', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'ribband-probe-'))
    const path = join(folder, '-i %03d concat:x|y "$(id)"\n.mp4')
    await copyFile(await makeClip('silent'), path)
    expect((await probeClip(path)).durationMs).toBe(2000)
    await rm(folder, { recursive: true })
  })
})

describe('extractSubtitles', () => {
  it('reads a text track as WebVTT', async () => {
    const path = await makeClip('with-subtitles')
    const { subtitles } = await probeClip(path)
    expect(subtitles).toEqual([{ index: 2, codec: 'mov_text', language: 'eng' }])
    const text = (await extractSubtitles(path, 2)).toString('utf8')
    expect(text).toMatch(/^WEBVTT/)
    expect(text).toContain('00:00.500 --> 00:01.500\nScarf the chine log.')
    expect(text).toContain('00:02.000 --> 00:03.250\nThen a seal coat.')
  })

  it('says that a track without text cannot be read', async () => {
    await expect(extractSubtitles(await makeClip('silent'), 7)).rejects.toBeInstanceOf(ClipFault)
  })
})
