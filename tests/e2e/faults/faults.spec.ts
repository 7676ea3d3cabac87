import { createHash, randomUUID } from 'node:crypto'
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { request, type APIRequestContext } from '@playwright/test'
import { execa } from 'execa'
import type { ChapterView, SessionDetail } from '#shared/types/session'
import type { PartAddresses, UploadBegun } from '#shared/types/uploads'
import { partRange } from '#shared/utils/upload'
import { expect, test } from '../../support/browser'
import { startProduct, type Product } from '../../support/startProduct'

/**
 * Each part of the product killed with SIGKILL in the middle of upload, index and tagging. Whatever was acknowledged
 * must still stand afterwards, and what was under way must finish. FAULT_ROUNDS says how often (npm test: once).
 */
const ROUNDS = Number(process.env.FAULT_ROUNDS ?? 1)
const VICTIMS = ['storage', 'site', 'worker', 'database'] as const
test.setTimeout(240_000 + ROUNDS * 180_000)

let product: Product
let api: APIRequestContext
let buildId: string
const folder = mkdtempSync(join(tmpdir(), 'ribband-faults-'))
/** The demo's nine clips would be indexed first, and nothing here looks at them. */
const env = { RIBBAND_DEMO: 'no' }

test.beforeAll(async () => {
  test.setTimeout(240_000)
  product = await startProduct({ env })
  api = await request.newContext({ baseURL: product.url, extraHTTPHeaders: { origin: new URL(product.url).origin } })
  await post('/api/auth/sign-up', { name: 'Kit Unlucky', email: 'kit@example.test', password: 'a long enough phrase' })
  buildId = (await post<{ id: string }>('/api/builds', { name: 'Kit\'s punt' })).id
})
test.afterAll(async () => {
  await api.dispose()
  await product.stop()
  rmSync(product.dataDir, { recursive: true, force: true })
  rmSync(folder, { recursive: true, force: true })
})

function pidOf(victim: typeof VICTIMS[number]): number {
  const file = victim === 'database' ? join(product.dataDir, 'postgres/postmaster.pid') : join(product.dataDir, 'run', victim)
  return Number(readFileSync(file, 'utf8').split('\n')[0])
}

/** Kills one part and waits until another one has taken its place and the site answers again. */
async function kill(victim: typeof VICTIMS[number]): Promise<void> {
  const pid = pidOf(victim)
  process.kill(pid, 'SIGKILL')
  await expect.poll(() => {
    try {
      return pidOf(victim)
    }
    catch {
      return pid
    }
  }, { timeout: 30_000 }).not.toBe(pid)
  await expect.poll(async () => (await api.get('/health').catch(() => null))?.status(), { timeout: 30_000 }).toBe(200)
}

/** Tries again while a part is away, as the page does. */
async function insist<T>(work: () => Promise<T>): Promise<T> {
  let failure: unknown
  for (let tries = 0; tries < 60; tries++) {
    try {
      return await work()
    }
    catch (error) {
      failure = error
      await new Promise(resolve => setTimeout(resolve, 500))
    }
  }
  throw failure
}

async function post<T>(path: string, data: unknown): Promise<T> {
  const response = await api.post(path, { data })
  if (!response.ok()) throw new Error(`${path}: ${response.status()} ${await response.text()}`)
  return response.json() as Promise<T>
}

async function makeFootage(round: number): Promise<Buffer> {
  const path = join(folder, `round-${round}.mp4`)
  // A keyframe every ten seconds, so that a proxy is made too: work enough to be killed in.
  await execa('ffmpeg', ['-nostdin', '-v', 'error', '-f', 'lavfi', '-i', `testsrc2=s=1280x720:r=30:d=12,noise=alls=${12 + round}:allf=t`, '-f', 'lavfi', '-i', 'sine=f=300:d=12', '-c:v', 'libx264', '-preset', 'ultrafast', '-g', '300', '-b:v', '16M', '-minrate', '16M', '-c:a', 'aac', '-movflags', '+faststart', path])
  return readFileSync(path)
}

const sha = (bytes: Buffer | string) => createHash('sha256').update(bytes).digest('hex')

async function upload(sessionId: string, name: string, bytes: Buffer, midway: () => Promise<void>): Promise<string> {
  const begin = () => insist(() => post<UploadBegun>(`/api/sessions/${sessionId}/clips`, { name, sizeBytes: bytes.length, contentType: 'video/mp4', fingerprint: sha(bytes) }))
  let begun = await begin()
  if (begun.kind !== 'upload') throw new Error('taken for a double')
  const { clipId, partSizeBytes, partCount } = begun
  expect(partCount).toBeGreaterThan(1)
  const piece = (partNumber: number) => {
    const { start, end } = partRange(bytes.length, partSizeBytes, partNumber)
    return bytes.subarray(start, end)
  }
  const send = async (partNumber: number) => {
    const { parts } = await post<PartAddresses>(`/api/clips/${clipId}/upload/parts`, { partNumbers: [partNumber] })
    const response = await fetch(parts[0]!.url, { method: 'PUT', body: new Uint8Array(piece(partNumber)) })
    if (!response.ok) throw new Error(`part ${partNumber}: ${response.status}`)
  }
  await insist(() => send(1))
  await midway()
  // After a reload of the page: the same file again, and what arrived is not sent twice.
  begun = await begin()
  if (begun.kind !== 'upload') throw new Error('taken for a double')
  expect(begun.clipId).toBe(clipId)
  expect(begun.uploaded.map(part => part.partNumber)).toContain(1)
  for (let partNumber = 2; partNumber <= partCount; partNumber++) await insist(() => send(partNumber))
  begun = await begin()
  if (begun.kind !== 'upload') throw new Error('taken for a double')
  const parts = begun.uploaded.map(({ partNumber, etag }) => ({ partNumber, etag, sha256: sha(piece(partNumber)) }))
  await insist(() => post(`/api/clips/${clipId}/upload/complete`, { parts }))
  return clipId
}

const session = async (sessionId: string) => (await insist(async () => (await api.get(`/api/sessions/${sessionId}`)).json())) as SessionDetail

for (let round = 0; round < ROUNDS; round++) {
  for (const victim of VICTIMS) {
    test(`the ${victim} is killed in the middle of upload, index and tagging (round ${round + 1})`, async () => {
      const bytes = await makeFootage(round * VICTIMS.length + VICTIMS.indexOf(victim))
      const { id: sessionId } = await insist(() => post<{ id: string }>(`/api/builds/${buildId}/sessions`, { date: '2026-10-10' }))
      const name = `VID_20261010_1000${VICTIMS.indexOf(victim)}${round}.mp4`
      const clipId = await upload(sessionId, name, bytes, () => kill(victim))
      const captions = 'WEBVTT\n\n00:00.500 --> 00:02.000\nthe knee goes on dry\n\n00:02.500 --> 00:05.000\nand now the glue\n'
      await insist(async () => expect((await api.post(`/api/sessions/${sessionId}/captions?name=${name.replace('mp4', 'vtt')}`, { data: Buffer.from(captions), headers: { 'content-type': 'application/octet-stream' } })).status()).toBe(201))

      // In the middle of probing, indexing or making the proxy, wherever it is by then.
      await expect.poll(async () => (await session(sessionId)).clips[0]?.tasks.some(task => task.state === 'working') || (await session(sessionId)).clips[0]?.state === 'ready', { timeout: 60_000 }).toBe(true)
      await kill(victim)
      await expect.poll(async () => (await session(sessionId)).clips[0]?.state, { timeout: 150_000, intervals: [500] }).toBe('ready')
      const clip = (await session(sessionId)).clips.find(one => one.id === clipId)!
      expect(clip.failure).toBeNull()
      expect(clip.durationMs).toBeGreaterThan(11_000)
      await expect.poll(async () => ((await (await api.get(`/api/sessions/${sessionId}/cues`)).json()).cues as unknown[]).length, { timeout: 30_000 }).toBe(2)

      const acknowledged = await tagWhile(sessionId, clipId, () => kill(victim))
      const { chapters } = await (await api.get(`/api/sessions/${sessionId}/chapters`)).json() as { chapters: ChapterView[] }
      expect(chapters.map(one => one.id)).toEqual(expect.arrayContaining(acknowledged))
    })
  }
}

/** Marks ten chapters one after another while a part dies; answers the ids that the site said it had kept. */
async function tagWhile(sessionId: string, clipId: string, killing: () => Promise<void>): Promise<string[]> {
  const acknowledged: string[] = []
  let dying: Promise<void> | undefined
  for (let n = 0; n < 10; n++) {
    const put = { id: randomUUID(), clipId, startMs: n * 1000, endMs: n * 1000 + 900, stepId: null, operation: 'cut', partIds: [], inking: 'inked', version: null }
    if (n === 3) dying = killing()
    const response = await api.post(`/api/sessions/${sessionId}/chapters`, { data: { put: [put] } }).catch(() => null)
    if (response?.ok()) acknowledged.push(put.id)
    else if (response) expect([409, 500, 503]).toContain(response.status())
  }
  await dying
  expect(acknowledged.length).toBeGreaterThanOrEqual(3)
  return acknowledged
}

test('what a killed start leaves behind is picked up by the next', async () => {
  const dataDir = product.dataDir
  const before = (await (await api.get('/api/builds')).json())
  product.process.kill('SIGKILL')
  await new Promise(resolve => product.process.once('exit', resolve))
  expect(existsSync(join(dataDir, 'postgres'))).toBe(true)
  product = await startProduct({ dataDir, env })
  expect(await (await api.get('/api/builds')).json()).toEqual(before)
})
