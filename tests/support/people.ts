import { randomBytes, randomUUID } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { type APIRequestContext, type BrowserContext, expect, request } from '@playwright/test'
import type { CueView, SessionDetail } from '#shared/types/session'
import type { UploadBegun } from '#shared/types/uploads'
import type { Role } from '#shared/types/trade'
import { type ClipKind, makeClip } from './clips'
import { productDatabase } from './productDatabase'
import { makeMember } from './rows'
import { fingerprintOf, sha256 } from './uploading'

/** Somebody with an account on the product under test, signed in both for requests and for pages. */
export interface Person {
  name: string
  api: APIRequestContext
  cookies: Parameters<BrowserContext['addCookies']>[0]
}

const siteUrl = () => process.env.RIBBAND_TEST_URL!

async function enter(path: string, data: Record<string, string>, name: string): Promise<Person> {
  const api = await request.newContext({ baseURL: siteUrl(), extraHTTPHeaders: { origin: new URL(siteUrl()).origin } })
  const response = await api.post(path, { data })
  expect(response.ok(), await response.text()).toBe(true)
  return { name, api, cookies: (await api.storageState()).cookies }
}

/** Somebody who has an account already. */
export const existingPerson = (account: { name: string, email: string, password: string }): Promise<Person> => enter('/api/auth/sign-in', { email: account.email, password: account.password }, account.name)

export const newPerson = (name: string): Promise<Person> => enter('/api/auth/sign-up', { name, email: `${randomUUID()}@example.test`, password: 'chine log and sheer' }, name)

async function post<T>(person: Person, path: string, data: unknown): Promise<T> {
  const response = await person.api.post(path, { data })
  expect(response.ok(), `${path}: ${response.status()} ${await response.text()}`).toBe(true)
  return await response.json() as T
}

export interface OwnBuild { id: string, address: string, builder: Person }

export async function newBuild(builder: Person, values: Record<string, unknown> = {}): Promise<OwnBuild> {
  const { id, address } = await post<{ id: string, address: string }>(builder, '/api/builds', { name: `${builder.name}'s skiff`, ...values })
  return { id, address, builder }
}

/** Nobody can be invited by page yet, so the row is laid down. */
export async function addMember(build: OwnBuild, person: Person, role: Role): Promise<void> {
  const { account } = await (await person.api.get('/api/auth/me')).json() as { account: { id: string } }
  const handle = productDatabase()
  await makeMember(handle.database, build, account, role)
  await handle.close()
}

export const newStep = (build: OwnBuild, title: string, stage = 'Hull') => post<{ id: string }>(build.builder, `/api/builds/${build.id}/steps`, { title, stage })

/** A session's id. */
export const newSession = async (build: OwnBuild, values: Record<string, unknown> = {}): Promise<string> => (await post<{ id: string }>(build.builder, `/api/builds/${build.id}/sessions`, { date: '2026-10-10', ...values })).id

/**
 * A clip whose content nobody has had before: a good one with a box of noise behind it, which players pass over
 * (ISO/IEC 14496-12: `free`). `moreBytes` makes it as large as a test needs.
 */
export async function freshClip(kind: ClipKind = 'good', moreBytes = 64): Promise<Buffer> {
  const head = Buffer.alloc(8)
  head.writeUInt32BE(8 + moreBytes)
  head.write('free', 4, 'latin1')
  return Buffer.concat([await readFile(await makeClip(kind)), head, randomBytes(moreBytes)])
}

/** Uploads a small clip by requests, and waits until it is ready. */
export async function uploadReadyClip(person: Person, sessionId: string, name: string, bytes: Buffer): Promise<string> {
  const begun = await post<UploadBegun>(person, `/api/sessions/${sessionId}/clips`, { name, sizeBytes: bytes.length, contentType: 'video/mp4', fingerprint: fingerprintOf(bytes) })
  if (begun.kind !== 'upload' || begun.partCount !== 1) throw new Error('Only for new clips of one part')
  const { parts } = await post<{ parts: { url: string }[] }>(person, `/api/clips/${begun.clipId}/upload/parts`, { partNumbers: [1] })
  const put = await fetch(parts[0]!.url, { method: 'PUT', body: new Uint8Array(bytes) })
  expect(put.ok).toBe(true)
  await post(person, `/api/clips/${begun.clipId}/upload/complete`, { parts: [{ partNumber: 1, etag: put.headers.get('etag'), sha256: sha256(bytes) }] })
  await expect.poll(async () => (await sessionDetail(person, sessionId)).clips.find(clip => clip.id === begun.clipId)?.state, { timeout: 60_000 }).toBe('ready')
  return begun.clipId
}

export async function uploadCaptions(person: Person, sessionId: string, name: string, text: string): Promise<void> {
  const response = await person.api.post(`/api/sessions/${sessionId}/captions?name=${encodeURIComponent(name)}`, { data: Buffer.from(text), headers: { 'content-type': 'application/octet-stream' } })
  expect(response.status()).toBe(201)
}

export const sessionDetail = async (person: Person, sessionId: string) => await (await person.api.get(`/api/sessions/${sessionId}`)).json() as SessionDetail
export const cuesOf = async (person: Person, sessionId: string) => ((await (await person.api.get(`/api/sessions/${sessionId}/cues`)).json()) as { cues: CueView[] }).cues
