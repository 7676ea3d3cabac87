import { mkdtemp, readFile, rm, readdir } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import type { ClipFault } from '../../../../../workers/media/ffmpeg/faults'
import { indexFootage } from '../../../../../workers/media/ffmpeg/indexFootage'
import { probeClip } from '../../../../../workers/media/ffmpeg/probe'
import { makeClip } from '../../../../support/clips'
import type { ClipKind } from '../../../../support/clips'
import { brightnessGrid } from '../../../../support/pictures'

let folder: string
let n = 0
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'ribband-index-'))
})
afterAll(() => rm(folder, { recursive: true }))

async function index(kind: ClipKind) {
  const path = await makeClip(kind)
  const outDir = join(folder, String(n++))
  const shares: number[] = []
  const footage = await indexFootage(path, await probeClip(path), { outDir, onProgress: share => shares.push(share) })
  return { footage, outDir, shares }
}

vi.setConfig({ testTimeout: 120_000 })

describe('indexFootage', () => {
  it('makes poster, sheets and peaks of an ordinary clip', async () => {
    const { footage, outDir, shares } = await index('good')
    expect(footage.method).toBe('keyframes')
    expect(footage.poster).toEqual({ file: 'poster.jpg', width: 320, height: 180 })
    expect(footage.sheets).toMatchObject({ intervalMs: 1000, tileWidth: 160, tileHeight: 90, columns: 16, rows: 15, count: 4, images: ['sheet-000.jpg'] })
    expect(footage.peaks).toEqual({ perSecond: 20, count: 80, file: 'peaks.u8' })
    expect((await readFile(join(outDir, 'peaks.u8'))).length).toBe(80)
    expect((await readdir(outDir)).sort()).toEqual(['peaks.u8', 'poster.jpg', 'sheet-000.jpg'])
    expect(shares.at(-1)).toBe(1)
    expect(shares).toEqual([...shares].sort((a, b) => a - b))
  })

  it('decodes everything once where keyframes are far apart', async () => {
    const { footage } = await index('long-gop')
    expect(footage.method).toBe('frames')
    expect(footage.sheets?.count).toBe(8)
    expect(footage.peaks?.count).toBe(160)
  })

  it('stands upright clips up', async () => {
    const { footage, outDir } = await index('rotated')
    expect(footage.poster).toMatchObject({ width: 180, height: 320 })
    expect(footage.sheets).toMatchObject({ tileWidth: 50, tileHeight: 90 })
    // Red over blue: the upper half is the brighter one, in the poster as in what ffmpeg itself turns upright.
    const own = await brightnessGrid(join(outDir, 'poster.jpg'), 1, 2)
    const turned = await brightnessGrid(await makeClip('rotated'), 1, 2)
    expect(Math.abs(own[0]![0]! - turned[0]![0]!)).toBeLessThan(6)
    expect(Math.abs(own[1]![0]! - turned[1]![0]!)).toBeLessThan(6)
    expect(Math.abs(own[0]![0]! - own[1]![0]!)).toBeGreaterThan(20)
  })

  it('finds both cuts to the frame', async () => {
    expect((await index('three-scenes')).footage.sceneChangesMs).toEqual([4300, 9100])
  })

  it('indexes the sound of a clip without picture', async () => {
    const { footage } = await index('audio-only')
    expect(footage).toMatchObject({ method: 'sound', poster: null, sheets: null, sceneChangesMs: [] })
    expect(footage.peaks?.count).toBe(60)
  })

  it('finds silences over hum', async () => {
    const { silences } = (await index('speech-over-hum')).footage
    expect(silences).toHaveLength(2)
    for (const [i, [startMs, endMs]] of [[2000, 3200], [5000, 6500]].entries()) {
      expect(Math.abs(silences[i]!.startMs - startMs!)).toBeLessThanOrEqual(50)
      expect(Math.abs(silences[i]!.endMs - endMs!)).toBeLessThanOrEqual(50)
    }
  })

  it.each(['old-avi', 'camcorder', 'matroska', 'webm', 'hevc', 'hdr', 'variable-rate', 'late-start', 'edit-list', 'numbered-keyframes-only'] as const)('copes with %s', async (kind) => {
    const { footage } = await index(kind)
    expect(footage.poster).not.toBeNull()
    expect(footage.sheets!.timesMs).toHaveLength(footage.sheets!.count)
    expect(footage.sheets!.timesMs).toEqual([...footage.sheets!.timesMs].sort((a, b) => a - b))
  })

  it('stops when its signal fires', async () => {
    const path = await makeClip('good')
    const probe = await probeClip(path)
    await expect(indexFootage(path, probe, { outDir: folder, signal: AbortSignal.abort(new Error('cancelled')) })).rejects.toThrow('cancelled')
  })

  it('says so when no picture can be decoded', async () => {
    const good = await probeClip(await makeClip('silent'))
    const error = await indexFootage(await makeClip('scrambled-pictures'), good, { outDir: folder }).catch((error: unknown) => error)
    expect((error as ClipFault).failure?.code).toBe('damaged')
  })
})
