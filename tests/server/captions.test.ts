import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { type CaptionTrack, captionTracks, type Clip, clipTasks, cues, passages, type Session } from '#server/database/schema'
import { MAX_CAPTION_BYTES, readCaptions as parse } from '#server/indexing/captions/readCaptions'
import { addCaptionFile, deleteTrack, originalAddress, pairWaitingTracks, updateTrack } from '#server/services/captions'
import { failTask } from '#server/services/clipTasks'
import { exportTrack, listCues, updateCue } from '#server/services/cues'
import { clipCaptions } from '#server/services/media'
import { readSession } from '#server/services/sessions'
import { cueChangesSchema, trackChangesSchema } from '#shared/schemas/captions'
import type { WorkerContext } from '../../workers/media/context'
import { readCaptions } from '../../workers/media/readCaptions'
import { type MediaBench, openMediaBench } from '../support/mediaBench'
import { makeClip, makeSession } from '../support/rows'

let bench: MediaBench
let session: Session

beforeAll(async () => {
  bench = await openMediaBench()
})
afterAll(() => bench.close())
beforeEach(async () => {
  session = await makeSession(bench.database.database, bench.build)
})

const db = () => bench.database.database
const add = (name: string, text: string | Buffer) => addCaptionFile(db(), bench.storage.storage, session.id, bench.builder.id, { name, bytes: Buffer.from(text as string) })
/** Runs the job as the worker would. */
const read = (trackId: string) => readCaptions({ database: db(), storage: bench.storage.storage } as WorkerContext, { trackId }, { signal: new AbortController().signal, attempt: 1, maxAttempts: 10 })
const track = async (id: string) => (await db().select().from(captionTracks).where(eq(captionTracks.id, id)))[0] as CaptionTrack
const texts = async (trackId: string) => (await db().select().from(cues).where(eq(cues.trackId, trackId)).orderBy(cues.startMs)).map(cue => cue.text)
const vtt = (...blocks: string[]) => `WEBVTT\n\n${blocks.join('\n\n')}\n`

describe('a caption file', () => {
  it('finds its clip by name, is kept as uploaded, read and found by searches', async () => {
    const clip = await makeClip(db(), session, { name: 'VID_1.mp4' })
    const bytes = Buffer.from(vtt('a\n00:01.000 --> 00:02.000\nGlue the <b>transom</b>', '00:03.000 --> 00:04.000\nThen clamp it'))
    const { trackId, clipId } = await add('vid_1.en-gb.vtt', bytes)
    expect(clipId).toBe(clip.id)
    await read(trackId)
    expect(await track(trackId)).toMatchObject({ language: 'en-GB', read: true, failure: null, warnings: [] })
    expect(await texts(trackId)).toEqual(['Glue the transom', 'Then clamp it'])
    expect((await bench.storage.storage.readBuffer((await track(trackId)).objectKey)).equals(bytes)).toBe(true)
    expect((await db().select().from(passages).where(eq(passages.clipId, clip.id))).length).toBeGreaterThan(0)
    expect(await db().select().from(clipTasks).where(eq(clipTasks.clipId, clip.id))).toMatchObject([{ task: 'read-captions', state: 'done' }])
    const answer = await fetch(await originalAddress(db(), bench.storage.storage, trackId))
    expect(answer.headers.get('content-disposition')).toContain('vid_1.en-gb.vtt')
    expect(answer.headers.get('content-type')).toBe('application/octet-stream')
    expect(Buffer.from(await answer.arrayBuffer()).equals(bytes)).toBe(true)
  })

  it('read twice is there once', async () => {
    await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.vtt', vtt('00:01.000 --> 00:02.000\nOnce'))
    await read(trackId)
    await read(trackId)
    expect(await texts(trackId)).toEqual(['Once'])
  })

  it('without a clip of its name waits, is checked at once, and goes to the clip that is chosen', async () => {
    const { trackId, clipId } = await add('recorder.srt', '1\n00:00:01,000 --> 00:00:02,000\nHello\n')
    expect(clipId).toBeNull()
    await read(trackId)
    expect(await track(trackId)).toMatchObject({ read: false, failure: null })
    expect(await texts(trackId)).toEqual([])
    const clip = await makeClip(db(), session)
    await updateTrack(db(), trackId, bench.builder.id, { clipId: clip.id, language: 'en' })
    await read(trackId)
    expect(await texts(trackId)).toEqual(['Hello'])
    expect(await track(trackId)).toMatchObject({ clipId: clip.id, language: 'en', read: true })
  })

  it('with two clips of its name waits for a person', async () => {
    await makeClip(db(), session, { name: 'a.mp4' })
    await makeClip(db(), session, { name: 'a.mp4' })
    expect((await add('a.vtt', vtt())).clipId).toBeNull()
  })

  it('goes to no clip of another session', async () => {
    const { trackId } = await add('x.vtt', vtt())
    const foreign = await makeClip(db(), await makeSession(db(), bench.build))
    await expect(updateTrack(db(), trackId, bench.builder.id, { clipId: foreign.id })).rejects.toMatchObject({ code: 'bad-input' })
  })

  it('moved to another clip keeps its corrections and is held against the new clip’s length', async () => {
    const [long, short] = [await makeClip(db(), session, { name: 'long.mp4', durationMs: 600_000 }), await makeClip(db(), session, { name: 'short.mp4', durationMs: 10_000 })]
    const { trackId } = await add('long.vtt', vtt('00:01.000 --> 00:02.000\nfirst', '03:20.000 --> 03:22.000\nlate'))
    await read(trackId)
    const [cue] = await listCues(db(), session.id)
    await updateCue(db(), cue!.id, bench.builder.id, { text: 'First!', version: 1 })
    await updateTrack(db(), trackId, bench.builder.id, { clipId: short.id })
    await read(trackId)
    expect(await texts(trackId)).toEqual(['First!', 'late'])
    expect((await track(trackId)).doubt).toContain('3 min 12 s longer than the clip')
    expect(await db().select().from(passages).where(eq(passages.clipId, long.id))).toEqual([])
    await expect(updateTrack(db(), trackId, bench.builder.id, { clipId: null })).rejects.toMatchObject({ code: 'conflict' })
  })

  it('deleted takes its captions and what searches knew of them', async () => {
    const clip = await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.vtt', vtt('00:01.000 --> 00:02.000\nHello'))
    await read(trackId)
    await deleteTrack(db(), trackId, bench.builder.id)
    expect(await texts(trackId)).toEqual([])
    expect(await db().select().from(passages).where(eq(passages.clipId, clip.id))).toEqual([])
  })
})

describe('odd and bad files', () => {
  it.each([
    ['text that is no captions', 'just some notes', /No captions could be read/],
    ['a binary file', Buffer.from([0x89, 0x50, 0x4E, 0x47, 0, 0, 0, 0, 1, 2, 3, 0, 0]), /does not hold text/],
  ])('%s: says so, kept as uploaded', async (_what, bytes, words) => {
    const clip = await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.srt', bytes)
    await read(trackId)
    const { failure, objectKey } = await track(trackId)
    expect(failure).toMatch(words)
    expect(failure).toContain('The file is kept as uploaded.')
    expect(await bench.storage.storage.head(objectKey)).not.toBeNull()
    expect(await db().select().from(clipTasks).where(eq(clipTasks.clipId, clip.id))).toMatchObject([{ state: 'failed' }])
  })

  it('out of order, overlapping, marked up, in another encoding: read, with remarks', async () => {
    await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.srt', Buffer.from('1\r\n00:00:05,000 --> 00:00:07,000\r\n<script>alert(1)</script>caf\xE9\r\n\r\n2\r\n00:00:01,000 --> 00:00:06,000\r\nEarlier\r\n', 'latin1'))
    await read(trackId)
    const list = await texts(trackId)
    expect(list[0]).toBe('Earlier')
    expect(list[1]).toContain('café')
    expect((await track(trackId)).warnings.length).toBeGreaterThanOrEqual(2)
  })

  it('one endless caption is cut for the page and said', async () => {
    await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.vtt', vtt(`00:01.000 --> 00:02.000\n${'glue '.repeat(4000)}`))
    await read(trackId)
    expect((await texts(trackId))[0]!.length).toBe(5000)
    expect((await track(trackId)).warnings[0]).toContain('longer than 5000 characters')
  })

  it('an empty file is refused', async () => {
    await expect(add('a.vtt', '')).rejects.toMatchObject({ code: 'unreadable' })
  })

  it('a file at the limit is read', async () => {
    const clip = await makeClip(db(), session, { name: 'a.mp4', durationMs: 2_000_000_000 })
    const line = (n: number) => `${String(Math.floor(n / 3600)).padStart(2, '0')}:${String(Math.floor(n / 60) % 60).padStart(2, '0')}:${String(n % 60).padStart(2, '0')}.000 --> ${String(Math.floor((n + 1) / 3600)).padStart(2, '0')}:${String(Math.floor((n + 1) / 60) % 60).padStart(2, '0')}:${String((n + 1) % 60).padStart(2, '0')}.000\n${'plank '.repeat(200)}`
    const text = vtt(...Array.from({ length: 4000 }, (_, n) => line(n)))
    expect(text.length).toBeLessThan(MAX_CAPTION_BYTES)
    const { trackId } = await add('a.vtt', text)
    await read(trackId)
    expect(await texts(trackId)).toHaveLength(4000)
    expect((await track(trackId)).clipId).toBe(clip.id)
  }, 60_000)
})

describe('a file that may belong to another clip', () => {
  const tooLong = vtt('00:01.000 --> 00:02.000\nHere', '09:00.000 --> 09:10.000\nElsewhere')
  const shown = async (id: string) => (await readSession(db(), session.id, { build: bench.build, role: 'builder' })).tracks.find(one => one.id === id)

  it('says so until a person says that it belongs, and asks again of another clip', async () => {
    const short = await makeClip(db(), session, { name: 'a.mp4', durationMs: 60_000 })
    const other = await makeClip(db(), session, { name: 'b.mp4', durationMs: 60_000 })
    const { trackId } = await add('a.vtt', tooLong)
    await read(trackId)
    expect(await shown(trackId)).toMatchObject({ clipId: short.id, read: true, warnings: [], doubt: expect.stringContaining('1 caption starts after its end') as string })
    await updateTrack(db(), trackId, bench.builder.id, { kept: true })
    await read(trackId)
    expect((await shown(trackId))!.doubt).toBeNull()
    await updateTrack(db(), trackId, bench.builder.id, { clipId: other.id })
    await read(trackId)
    expect(await shown(trackId)).toMatchObject({ clipId: other.id, doubt: expect.stringContaining('longer than the clip') as string })
  })

  it('has nothing to say of a clip that is long enough', async () => {
    await makeClip(db(), session, { name: 'a.mp4', durationMs: 600_000 })
    const { trackId } = await add('a.vtt', tooLong)
    await read(trackId)
    expect((await shown(trackId))!.doubt).toBeNull()
  })
})

describe('a clip whose file is broken', () => {
  const breakClip = (clip: Clip, code: 'not-a-video' | 'internal') => db().transaction(tx => failTask(tx, clip, 'probe-clip', { code, message: 'Broken.' }))

  it('lets go of its captions, which go to the file that is sent instead', async () => {
    const broken = await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.vtt', vtt('00:01.000 --> 00:02.000\nHere'))
    await read(trackId)
    await breakClip(broken, 'not-a-video')
    expect(await track(trackId)).toMatchObject({ clipId: null, read: false })
    await expect(updateTrack(db(), trackId, bench.builder.id, { clipId: broken.id })).rejects.toMatchObject({ code: 'bad-input', message: expect.stringContaining('could not be read') as string })
    const whole = await makeClip(db(), session, { name: 'a.mp4' })
    await db().transaction(tx => pairWaitingTracks(tx, session.id))
    expect(await track(trackId)).toMatchObject({ clipId: whole.id })
  })

  it('keeps captions that somebody corrected, and those of a failure that may mend', async () => {
    const broken = await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.vtt', vtt('00:01.000 --> 00:02.000\nHere'))
    await read(trackId)
    await breakClip(broken, 'internal')
    expect((await track(trackId)).clipId).toBe(broken.id)
    await updateCue(db(), (await listCues(db(), session.id))[0]!.id, bench.builder.id, { text: 'There', version: 1 })
    await breakClip(broken, 'not-a-video')
    expect((await track(trackId)).clipId).toBe(broken.id)
    expect(await texts(trackId)).toEqual(['There'])
  })
})

describe('correcting in place', () => {
  it('keeps the words as they came, refuses an older version, and takes a correction back', async () => {
    await makeClip(db(), session, { name: 'a.mp4' })
    const { trackId } = await add('a.vtt', vtt('00:01.000 --> 00:02.000\nGlue the transfer'))
    await read(trackId)
    const [cue] = await listCues(db(), session.id)
    const changed = await updateCue(db(), cue!.id, bench.builder.id, { text: 'Glue the transom', version: 1 })
    expect(changed).toMatchObject({ text: 'Glue the transom', edited: true, original: 'Glue the transfer', version: 2 })
    await expect(updateCue(db(), cue!.id, bench.builder.id, { text: 'Mine', version: 1 })).rejects.toMatchObject({ code: 'conflict', data: { current: { text: 'Glue the transom', version: 2 } } })
    expect((await db().select().from(cues).where(eq(cues.id, cue!.id)))[0]!.originalText).toBe('Glue the transfer')
    expect(await updateCue(db(), cue!.id, bench.builder.id, { text: 'Glue the transfer', version: 2 })).toMatchObject({ edited: false, original: null, version: 3 })
  })

  it('accepts words only', () => {
    expect(cueChangesSchema.parse({ text: '  two \r\n\r\n lines ', version: 1 }).text).toBe('two\nlines')
    for (const text of ['', ' \n ', 'x'.repeat(2001)]) expect(cueChangesSchema.safeParse({ text, version: 1 }).success).toBe(false)
    expect(trackChangesSchema.parse({ language: 'EN-gb' }).language).toBe('en-GB')
    expect(trackChangesSchema.safeParse({ language: 'not a tag' }).success).toBe(false)
  })
})

it('writes out what stands, as .vtt and .srt, the same when read back', async () => {
  const clip = await makeClip(db(), session, { name: 'a.mp4' })
  const { trackId } = await add('a.vtt', vtt('intro\n00:01.000 --> 00:02.500\nA &lt; B &amp; C', '00:03.000 --> 00:04.000\ntwo\nlines'))
  await read(trackId)
  for (const format of ['vtt', 'srt'] as const) {
    const file = await exportTrack(db(), trackId, format)
    expect(file.name).toBe(`a.${format}`)
    expect(parse(Buffer.from(file.text), { name: file.name }).cues.map(({ startMs, endMs, text }) => ({ startMs, endMs, text }))).toEqual([
      { startMs: 1000, endMs: 2500, text: 'A < B & C' }, { startMs: 3000, endMs: 4000, text: 'two\nlines' },
    ])
  }
  expect(await clipCaptions(db(), clip, trackId)).toContain('A &lt; B &amp; C')
})
