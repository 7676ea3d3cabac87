import { randomBytes } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { type Build, captionTracks, clips, clipTasks, type Session, uploads, type User } from '#server/database/schema'
import { addCaptionFile } from '#server/services/captions'
import { deleteClip } from '#server/services/clips'
import { combineHashes } from '#server/services/contentHash'
import { beginUpload, completeUpload, partAddresses } from '#server/services/uploads'
import type { BeginUpload } from '#shared/schemas/clips'
import type { UploadBegun } from '#shared/types/uploads'
import { testDatabase, type TestDatabase } from '../support/database'
import { makeBuild, makeSession, makeUser } from '../support/rows'
import { startTestStorage, type TestStorage } from '../support/storage'
import { fingerprintOf, putPart, sendParts, sha256, uploadFile } from '../support/uploading'

type Begun = Extract<UploadBegun, { kind: 'upload' }>
const PART = 8 * 1024 * 1024

let handle: TestDatabase
let storageServer: TestStorage
let builder: User
let build: Build
let session: Session

beforeAll(async () => {
  handle = await testDatabase()
  storageServer = await startTestStorage()
})
afterAll(async () => {
  await storageServer.stop()
  await handle.drop()
})
beforeEach(async () => {
  builder = await makeUser(handle.database)
  build = await makeBuild(handle.database, {}, { builder })
  session = await makeSession(handle.database, build)
})

const describeFile = (bytes: Buffer, more: Partial<BeginUpload> = {}): BeginUpload => ({ name: 'clip.mp4', sizeBytes: bytes.length, contentType: 'video/mp4', fingerprint: fingerprintOf(bytes), ...more })
const begin = (bytes: Buffer, more: Partial<BeginUpload> = {}, into = session) => beginUpload(handle.database, storageServer.storage, into.id, builder.id, describeFile(bytes, more))
const begun = async (bytes: Buffer, more: Partial<BeginUpload> = {}) => await begin(bytes, more) as Begun
const send = (clipId: string, bytes: Buffer, plan: Begun, only?: (n: number) => boolean) => sendParts(handle.database, storageServer.storage, clipId, bytes, plan, only)
const complete = (clipId: string, parts: Awaited<ReturnType<typeof send>>) => completeUpload(handle.database, storageServer.storage, clipId, builder.id, { parts })
const stateOf = async (clipId: string) => (await handle.database.select().from(clips).where(eq(clips.id, clipId)))[0]
const jobs = async () => (await handle.database.execute<{ key: string }>(sql`select key from graphile_worker.jobs order by id`)).rows.map(row => row.key)

describe('an upload from beginning to end', () => {
  it('goes straight to the storage in parts and leaves a clip, its checksum and one job', async () => {
    const bytes = randomBytes(2 * PART + 1000)
    const upload = await begun(bytes)
    expect(upload).toMatchObject({ kind: 'upload', partSizeBytes: PART, partCount: 3, uploaded: [] })
    const parts = await send(upload.clipId, bytes, upload)
    await complete(upload.clipId, parts)
    const clip = (await stateOf(upload.clipId))!
    expect(clip).toMatchObject({ state: 'waiting', sizeBytes: bytes.length, contentHash: combineHashes(parts.map(part => part.sha256)), uploadedBy: builder.id })
    expect((await storageServer.storage.readBuffer(clip.objectKey)).equals(bytes)).toBe(true)
    expect(await handle.database.select().from(uploads).where(eq(uploads.clipId, upload.clipId))).toEqual([])
    expect(await jobs()).toContain(`probe-clip:${upload.clipId}`)
    expect(await handle.database.select().from(clipTasks).where(eq(clipTasks.clipId, upload.clipId))).toMatchObject([{ task: 'probe-clip', state: 'waiting' }])
  })

  it('takes parts in any order and a second completion after a lost answer', async () => {
    const bytes = randomBytes(PART + 5)
    const upload = await begun(bytes)
    const parts = (await send(upload.clipId, bytes, upload)).reverse()
    await complete(upload.clipId, parts)
    await expect(complete(upload.clipId, parts)).resolves.toEqual({ clipId: upload.clipId })
    expect((await jobs()).filter(key => key === `probe-clip:${upload.clipId}`)).toHaveLength(1)
  })

  it('finishes when the storage completed but the site died before it wrote the row', async () => {
    const bytes = randomBytes(PART + 7)
    const upload = await begun(bytes)
    const parts = await send(upload.clipId, bytes, upload)
    const [row] = await handle.database.select().from(uploads).where(eq(uploads.clipId, upload.clipId))
    await storageServer.storage.completeUpload((await stateOf(upload.clipId))!.objectKey, row!.uploadId, parts)
    await complete(upload.clipId, parts)
    expect((await stateOf(upload.clipId))!.state).toBe('waiting')
  })
})

describe('going on with an interrupted upload', () => {
  it('finds the same file again, under another name too, and asks only for what is missing', async () => {
    const bytes = randomBytes(3 * PART)
    const first = await begun(bytes)
    const sent = await send(first.clipId, bytes, first, n => n !== 2)
    const again = await begun(bytes, { name: 'renamed.mp4' })
    expect(again.clipId).toBe(first.clipId)
    expect(again.uploaded.map(part => part.partNumber)).toEqual([1, 3])
    const rest = await send(again.clipId, bytes, again, n => n === 2)
    await complete(again.clipId, [...sent, ...rest])
    expect((await stateOf(first.clipId))!.state).toBe('waiting')
  })

  it('begins afresh when the storage gave the upload up', async () => {
    const bytes = randomBytes(PART + 1)
    const first = await begun(bytes)
    await send(first.clipId, bytes, first, n => n === 1)
    const [row] = await handle.database.select().from(uploads).where(eq(uploads.clipId, first.clipId))
    await storageServer.storage.abortUpload((await stateOf(first.clipId))!.objectKey, row!.uploadId)
    const again = await begun(bytes)
    expect(again).toMatchObject({ clipId: first.clipId, uploaded: [] })
    await complete(again.clipId, await send(again.clipId, bytes, again))
    expect((await stateOf(first.clipId))!.state).toBe('waiting')
  })

  it('gives two pages that begin at once the same upload', async () => {
    const bytes = randomBytes(1000)
    const [one, two] = await Promise.all([begun(bytes), begun(bytes)])
    expect(two.clipId).toBe(one.clipId)
    expect(await handle.database.select().from(clips).where(eq(clips.sessionId, session.id))).toHaveLength(1)
    await complete(one.clipId, await send(two.clipId, bytes, two))
  })

  it('says so when the file is under way to another session', async () => {
    const bytes = randomBytes(1000)
    const first = await begun(bytes)
    const other = await makeSession(handle.database, build)
    await expect(begin(bytes, {}, other)).rejects.toMatchObject({ code: 'conflict', data: { clipId: first.clipId, sessionId: session.id } })
  })
})

describe('parts that are not what they should be', () => {
  it('names missing parts and keeps the others', async () => {
    const bytes = randomBytes(2 * PART + 1)
    const upload = await begun(bytes)
    const parts = await send(upload.clipId, bytes, upload, n => n !== 3)
    const claimed = [...parts, { partNumber: 3, etag: '"00000000000000000000000000000000"', sha256: sha256(Buffer.alloc(1)) }]
    await expect(complete(upload.clipId, claimed)).rejects.toMatchObject({ code: 'conflict', data: { missing: [3] } })
    expect((await stateOf(upload.clipId))!.state).toBe('uploading')
    await complete(upload.clipId, [...parts, ...await send(upload.clipId, bytes, upload, n => n === 3)])
  })

  it('does not take a part of the wrong size or with another ETag', async () => {
    const bytes = randomBytes(2 * PART)
    const upload = await begun(bytes)
    const parts = await send(upload.clipId, bytes, upload)
    const { parts: [address] } = await partAddresses(handle.database, storageServer.storage, upload.clipId, [2])
    const etag = await putPart(address!.url, randomBytes(1000))
    await expect(complete(upload.clipId, parts)).rejects.toMatchObject({ data: { missing: [2] } })
    await expect(complete(upload.clipId, [parts[0]!, { partNumber: 2, etag, sha256: parts[1]!.sha256 }])).rejects.toMatchObject({ data: { missing: [2] } })
    expect((await begun(bytes)).uploaded.map(part => part.partNumber)).toEqual([1])
  })

  it('refuses addresses for parts that do not exist, and after the end', async () => {
    const bytes = randomBytes(100)
    const upload = await begun(bytes)
    await expect(partAddresses(handle.database, storageServer.storage, upload.clipId, [2])).rejects.toThrow('There is no part 2: the file has 1.')
    await complete(upload.clipId, await send(upload.clipId, bytes, upload))
    await expect(partAddresses(handle.database, storageServer.storage, upload.clipId, [1])).rejects.toMatchObject({ code: 'conflict' })
  })

  it('refuses an empty file and one above 50 GB before anything is written', async () => {
    await expect(begin(Buffer.alloc(0))).rejects.toMatchObject({ code: 'unreadable' })
    await expect(begin(Buffer.alloc(1), { sizeBytes: 50_000_000_001 })).rejects.toMatchObject({ code: 'too-large' })
    expect(await handle.database.select().from(clips).where(eq(clips.sessionId, session.id))).toEqual([])
  })
})

describe('doubles by content', () => {
  it('asks to compare when samples agree, refuses the same content with where it is, takes other content', async () => {
    const bytes = randomBytes(PART + 3 * 1024 * 1024)
    const standing = await uploadFile(handle.database, storageServer.storage, session.id, builder.id, { name: 'first.mp4', bytes })
    const other = await makeSession(handle.database, build)
    expect(await begin(bytes, { name: 'copy.mp4' }, other)).toMatchObject({ kind: 'hash-first', partCount: 2, candidate: { clipId: standing, sessionId: session.id, name: 'first.mp4' } })
    const hash = combineHashes([sha256(bytes.subarray(0, PART)), sha256(bytes.subarray(PART))])
    const refusal = await begin(bytes, { name: 'copy.mp4', contentHash: hash }, other).catch(error => error)
    expect(refusal).toMatchObject({ code: 'conflict', data: { clipId: standing, sessionId: session.id, name: 'first.mp4' } })
    expect(refusal.message).toContain('copy.mp4 is in this build already as first.mp4')
    expect(await begin(bytes, { contentHash: sha256(Buffer.from('other')) }, other)).toMatchObject({ kind: 'upload' })
  })

  it('takes the same file into another build', async () => {
    const bytes = randomBytes(1000)
    await uploadFile(handle.database, storageServer.storage, session.id, builder.id, { name: 'a.mp4', bytes })
    const elsewhere = await makeSession(handle.database, await makeBuild(handle.database, {}, { builder }))
    expect(await begin(bytes, {}, elsewhere)).toMatchObject({ kind: 'upload' })
  })

  it('removes an upload that turns out to be a double at its end, and gives its captions to the clip that stays', async () => {
    const bytes = randomBytes(1000)
    const standing = await uploadFile(handle.database, storageServer.storage, session.id, builder.id, { name: 'a.mp4', bytes })
    const double = await begun(bytes, { name: 'b.mp4', fingerprint: sha256(Buffer.from('another page had no fingerprint to compare')) })
    const { trackId } = await addCaptionFile(handle.database, storageServer.storage, session.id, builder.id, { name: 'b.vtt', bytes: Buffer.from('WEBVTT\n\n00:01.000 --> 00:02.000\nHello') })
    await expect(complete(double.clipId, await send(double.clipId, bytes, double))).rejects.toMatchObject({ code: 'conflict', data: { clipId: standing } })
    expect(await stateOf(double.clipId)).toBeUndefined()
    expect(await handle.database.select({ clipId: captionTracks.clipId }).from(captionTracks).where(eq(captionTracks.id, trackId))).toEqual([{ clipId: standing }])
    expect(await jobs()).toContain(`remove-objects:clips/${double.clipId}/`)
  })
})

it('cancelling an upload lets its captions wait for another clip', async () => {
  const bytes = randomBytes(1000)
  const upload = await begun(bytes, { name: 'c.mp4' })
  const { trackId, clipId } = await addCaptionFile(handle.database, storageServer.storage, session.id, builder.id, { name: 'c.en.srt', bytes: Buffer.from('1\n00:00:01,000 --> 00:00:02,000\nHello\n') })
  expect(clipId).toBe(upload.clipId)
  await deleteClip(handle.database, upload.clipId, builder.id)
  expect(await stateOf(upload.clipId)).toBeUndefined()
  expect(await handle.database.select({ clipId: captionTracks.clipId }).from(captionTracks).where(eq(captionTracks.id, trackId))).toEqual([{ clipId: null }])
})
