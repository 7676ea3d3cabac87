import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { captionTracks, cues } from '#server/database/schema'
import { isPlayable } from '#server/services/clipView'
import { type ClipKind, makeClip } from '../../support/clips'
import { type MediaBench, openMediaBench } from '../../support/mediaBench'
import { until } from '../../support/until'

const GOOD = ['good', 'index-last', 'rotated', 'variable-rate', 'late-start', 'edit-list', 'hevc', 'long-gop', 'audio-only', 'with-subtitles', 'matroska'] as const satisfies ClipKind[]
/** What each bad file is told. Every message also says what was kept and what to do. */
const BAD: Partial<Record<ClipKind, [code: string, words: RegExp]>> = {
  'text': ['not-a-video', /not a video or sound file/],
  'zeros': ['not-a-video', /not a video or sound file/],
  'no-index': ['truncated', /cut short/],
  'cut-off': ['truncated', /cut short/],
  'playlist-file': ['forbidden-format', /points at files elsewhere/],
  'playlist-http': ['forbidden-format', /points at files elsewhere/],
  'concat-list': ['forbidden-format', /points at files elsewhere/],
  'dash-manifest': ['forbidden-format', /points at files elsewhere/],
  'picture-named-mp4': ['not-a-video', /not a video or sound file/],
  'many-streams': ['too-many-streams', /tracks/],
  'absurd-size': ['picture-too-large', /40 million pixels/],
}

let bench: MediaBench
const ids = new Map<ClipKind, string>()
const settled = (kind: ClipKind) => bench.settled(ids.get(kind)!)

beforeAll(async () => {
  bench = await openMediaBench()
  await bench.startWorker({ concurrency: 3 })
  for (const kind of [...GOOD, ...Object.keys(BAD) as ClipKind[]]) ids.set(kind, await bench.upload(await makeClip(kind)))
}, 120_000)
afterAll(() => bench.close())

describe('good and odd clips', () => {
  it('a clip that plays as it is: probed, placed, indexed, no copy made', async () => {
    const clip = await settled('good')
    expect(clip).toMatchObject({ state: 'ready', failure: null, proxyKey: null, durationMs: 4000, recordedAtSource: 'container' })
    expect(clip.recordedAt?.toISOString()).toBe('2024-05-11T14:03:20.000Z')
    const { poster, sheets, peaks } = clip.footage!
    for (const key of [poster!.key, ...sheets!.images, peaks!.key]) expect(await bench.storage.storage.head(key)).not.toBeNull()
    expect((await bench.storage.storage.readBuffer(peaks!.key)).length).toBe(peaks!.count)
    expect((await bench.storage.storage.readBuffer(poster!.key)).subarray(0, 2).toString('hex')).toBe('ffd8')
  })

  it.each(['variable-rate', 'late-start', 'edit-list', 'hevc', 'long-gop', 'index-last', 'matroska'] as const)('%s: a copy for watching is made and the clip is ready', async (kind) => {
    const clip = await settled(kind)
    expect(clip.failure).toBeNull()
    expect(clip.state).toBe('ready')
    expect(clip.probe!.proxyReasons.length).toBeGreaterThan(0)
    expect((await bench.storage.storage.head(clip.proxyKey!))!.sizeBytes).toBeGreaterThan(1000)
    expect(clip.footage!.sheets!.count).toBeGreaterThan(0)
    expect(isPlayable(clip)).toBe(true)
    for (const task of ['probe-clip', 'make-proxy', 'index-footage'] as const) expect(await bench.task(clip.id, task)).toMatchObject({ state: 'done', progress: 1 })
  }, 90_000)

  it('long keyframe distances: indexed from the copy, by keyframes', async () => {
    expect((await settled('long-gop')).footage!.method).toBe('keyframes')
  })

  it('a clip held upright is as high as it is shown', async () => {
    expect((await settled('rotated')).probe!.video).toMatchObject({ width: 180, height: 320 })
  })

  it('sound only: ready, with peaks and without pictures', async () => {
    const clip = await settled('audio-only')
    expect(clip).toMatchObject({ state: 'ready', probe: { video: null }, footage: { method: 'sound', sheets: null } })
    expect(clip.footage!.peaks!.count).toBeGreaterThan(50)
    expect(clip.probe!.warnings.join()).toContain('sound only')
  })

  it('subtitles inside a clip become captions of it', async () => {
    const clip = await settled('with-subtitles')
    const track = await until(async () => (await bench.database.database.select().from(captionTracks).where(eq(captionTracks.clipId, clip.id))).find(row => row.read))
    expect(track).toMatchObject({ language: 'en', failure: null })
    expect(track.embeddedStream).not.toBeNull()
    const read = await bench.database.database.select({ text: cues.text, startMs: cues.startMs, endMs: cues.endMs }).from(cues).where(eq(cues.trackId, track.id)).orderBy(cues.startMs)
    expect(read).toEqual([{ text: 'Scarf the chine log.', startMs: 500, endMs: 1500 }, { text: 'Then a seal coat.', startMs: 2000, endMs: 3250 }])
  })
})

describe('bad files say what happened and what was kept', () => {
  it.each(Object.entries(BAD) as [ClipKind, [string, RegExp]][])('%s', async (kind, [code, words]) => {
    const clip = await settled(kind)
    expect(clip.state).toBe('failed')
    expect(clip.failure!.code).toBe(code)
    expect(clip.failure!.message).toMatch(words)
    expect(clip.failure!.message).toMatch(/kept as uploaded/)
    expect(await bench.storage.storage.head(clip.objectKey)).toMatchObject({ sizeBytes: clip.sizeBytes })
    // The file is at fault, so one try is enough.
    expect(await bench.task(clip.id, 'probe-clip')).toMatchObject({ state: 'failed', attempts: 1, message: clip.failure!.message })
  }, 60_000)
})
