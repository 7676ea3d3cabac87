import { randomBytes } from 'node:crypto'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { createServer, request as forward, type IncomingMessage, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest'
import { createS3Storage } from '#server/adapters/s3Storage'
import type { Storage } from '#server/adapters/storage'
import { openS3Target, type S3Target } from '../../support/s3Target'

const MIB = 1024 ** 2
let target: S3Target
let storage: Storage
let folder: string
beforeAll(async () => {
  target = await openS3Target()
  storage = target.storage
  folder = await mkdtemp(join(tmpdir(), 'ribband-adapter-'))
})
afterAll(async () => {
  await target.stop()
  await rm(folder, { recursive: true, force: true })
})
afterEach(() => void vi.useRealTimers())

const unavailable = expect.objectContaining({ name: 'DomainError', code: 'unavailable' })

/** A network that breaks: `cut` says after how many bytes of the answer, or null to let it through. */
async function breakingNetwork(cut: (request: IncomingMessage) => number | null): Promise<{ storage: Storage, close(): Promise<void> }> {
  const server: Server = createServer((incoming, outgoing) => {
    const onward = forward(target.config.endpoint + incoming.url, { method: incoming.method, headers: incoming.headers }, (answer) => {
      const limit = cut(incoming)
      if (limit === null) {
        outgoing.writeHead(answer.statusCode!, answer.headers)
        return void answer.pipe(outgoing)
      }
      let sent = 0
      if (limit > 0) outgoing.writeHead(answer.statusCode!, answer.headers)
      answer.on('data', (bytes: Buffer) => {
        if (limit > 0) outgoing.write(bytes)
        sent += bytes.length
        if (sent >= limit) outgoing.destroy()
      })
    })
    onward.on('error', () => outgoing.destroy())
    incoming.pipe(onward)
  })
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const through = createS3Storage({ ...target.config, endpoint: `http://127.0.0.1:${(server.address() as AddressInfo).port}` })
  return {
    storage: through,
    close: () => {
      through.close()
      server.closeAllConnections()
      return new Promise(resolve => server.close(() => resolve()))
    },
  }
}

describe('files', () => {
  it.each([0, 1000, 33 * MIB + 3])('of %i bytes are stored and fetched', async (size) => {
    const [from, to] = [join(folder, 'from'), join(folder, 'to')]
    const bytes = randomBytes(size)
    await writeFile(from, bytes)
    await storage.writeFile('file', from, 'video/mp4')
    expect(await storage.head('file')).toMatchObject({ sizeBytes: size, contentType: 'video/mp4' })
    await storage.fetchToFile('file', to)
    expect((await readFile(to)).equals(bytes)).toBe(true)
  })

  it('are fetched whole although the connection breaks', async () => {
    const bytes = randomBytes(6 * MIB)
    await storage.write('broken', bytes, 'video/mp4')
    const ranges: unknown[] = []
    const network = await breakingNetwork((request) => {
      ranges.push(request.headers.range)
      return ranges.length <= 2 ? 2 * MIB : null
    })
    await network.storage.fetchToFile('broken', join(folder, 'broken'))
    await network.close()
    expect((await readFile(join(folder, 'broken'))).equals(bytes)).toBe(true)
    expect(ranges).toEqual([undefined, expect.stringMatching(/^bytes=\d+-$/), expect.stringMatching(/^bytes=\d+-$/)])
  })

  it('stop when they are told to', async () => {
    await storage.write('stopped', randomBytes(MIB), 'video/mp4')
    await expect(storage.fetchToFile('stopped', join(folder, 'stopped'), AbortSignal.abort())).rejects.toMatchObject({ name: 'AbortError' })
    await expect(storage.writeFile('never', join(folder, 'from'), 'video/mp4', AbortSignal.abort())).rejects.toMatchObject({ name: 'AbortError' })
    expect(await storage.head('never')).toBeNull()
  })

  it('on this side that cannot be written are not blamed on the storage', async () => {
    await storage.write('here', 'x', 'text/plain')
    await expect(storage.fetchToFile('here', join(folder, 'no', 'such', 'folder'))).rejects.toMatchObject({ code: 'ENOENT' })
  })
})

describe('reading', () => {
  it('gives a range', async () => {
    await storage.write('text', '0123456789', 'text/plain')
    const text = async (bytes?: { start: number, end?: number }) => {
      let all = ''
      for await (const piece of await storage.read('text', bytes)) all += piece.toString()
      return all
    }
    expect([await text(), await text({ start: 8 }), await text({ start: 2, end: 3 })]).toEqual(['0123456789', '89', '23'])
  })

  it('says what is not there', async () => {
    expect(await storage.head('missing')).toBeNull()
    await expect(storage.read('missing')).rejects.toMatchObject({ code: 'not-found' })
    await expect(storage.readBuffer('missing')).rejects.toMatchObject({ code: 'not-found' })
    await expect(storage.fetchToFile('missing', join(folder, 'missing'))).rejects.toMatchObject({ code: 'not-found' })
  })

  it('removes and lists by prefix, in batches', async () => {
    await storage.write('tidy/1', 'a', 'text/plain')
    await storage.write('tidy/2', 'bc', 'text/plain')
    const found = []
    for await (const each of storage.list('tidy/')) found.push(each)
    expect(found).toEqual([{ key: 'tidy/1', sizeBytes: 1 }, { key: 'tidy/2', sizeBytes: 2 }])
    await storage.remove([...Array.from({ length: 1001 }, (_, index) => `tidy/none/${index}`), 'tidy/1', 'tidy/2'])
    expect(await storage.head('tidy/2')).toBeNull()
    await storage.remove([])
  })
})

describe('uploads', () => {
  async function ready(key: string, through = storage) {
    const uploadId = await through.beginUpload(key, 'video/mp4')
    const answer = await fetch(await storage.presignPart(key, uploadId, 1, 60), { method: 'PUT', body: randomBytes(1000) })
    return { uploadId, parts: [{ partNumber: 1, etag: answer.headers.get('etag')! }] }
  }

  it('are completed as often as one asks', async () => {
    const { uploadId, parts } = await ready('twice')
    expect(await storage.listParts('twice', uploadId)).toEqual([{ partNumber: 1, sizeBytes: 1000, etag: parts[0]!.etag.replaceAll('"', '') }])
    const first = await storage.completeUpload('twice', uploadId, parts)
    expect(first).toMatchObject({ sizeBytes: 1000, contentType: 'video/mp4' })
    expect(await storage.completeUpload('twice', uploadId, parts)).toEqual(first)
    expect(await storage.listParts('twice', uploadId)).toBeNull()
  })

  it('are completed although every answer is lost', async () => {
    const network = await breakingNetwork(request => (request.method === 'POST' && request.url!.includes('uploadId=') ? 0 : null))
    const { uploadId, parts } = await ready('lost', network.storage)
    expect(await network.storage.completeUpload('lost', uploadId, parts)).toMatchObject({ sizeBytes: 1000 })
    await network.close()
  })

  it('are not taken for complete when another object stands there', async () => {
    await storage.write('taken', 'something else', 'text/plain')
    const { uploadId, parts } = await ready('taken')
    await storage.abortUpload('taken', uploadId)
    await storage.abortUpload('taken', uploadId)
    await expect(storage.completeUpload('taken', uploadId, parts)).rejects.toMatchObject({ code: 'not-found' })
    expect((await storage.readBuffer('taken')).toString()).toBe('something else')
  })

  it('say when parts are missing', async () => {
    const { uploadId, parts } = await ready('gap')
    await expect(storage.completeUpload('gap', uploadId, [...parts, { partNumber: 2, etag: parts[0]!.etag }])).rejects.toMatchObject({ code: 'conflict' })
    await storage.completeUpload('gap', uploadId, parts)
  })
})

describe('presigned addresses for reading', () => {
  it('stay the same for an hour and hold for as long as asked', async () => {
    await storage.write('picture', 'x', 'image/jpeg')
    const hour = Math.floor(Date.now() / 3600_000) * 3600_000
    const at = async (time: number) => {
      vi.useFakeTimers({ now: time, toFake: ['Date'] })
      const url = await storage.presignGet('picture', { expiresInSeconds: 1800 })
      vi.useRealTimers()
      return url
    }
    const [early, late, next] = [await at(hour + 1000), await at(hour + 3599_000), await at(hour + 3601_000)]
    expect(early).toBe(late)
    expect(next).not.toBe(early)
    const query = new URL(late).searchParams
    expect(Number(query.get('X-Amz-Expires')) * 1000 + hour).toBeGreaterThanOrEqual(hour + 3599_000 + 1800_000)
    const answer = await fetch(await storage.presignGet('picture'))
    expect([answer.status, answer.headers.get('cache-control')]).toEqual([200, 'private, max-age=3600'])
  })

  it('use the address that browsers know', async () => {
    const elsewhere = createS3Storage({ ...target.config, publicEndpoint: 'https://media.example' })
    expect(await elsewhere.presignGet('a b')).toMatch(`https://media.example/${target.config.bucket}/a%20b?`)
    expect(await elsewhere.presignPart('a', 'id', 3, 60)).toMatch('https://media.example/')
    elsewhere.close()
  })
})

describe('trouble', () => {
  it('is put into words when nothing listens', async () => {
    const nobody = createS3Storage({ ...target.config, endpoint: 'http://127.0.0.1:9' })
    await expect(nobody.ping()).rejects.toEqual(unavailable)
    await expect(nobody.head('x')).rejects.toEqual(unavailable)
    await expect(nobody.write('x', 'y', 'text/plain')).rejects.toEqual(unavailable)
    nobody.close()
  })

  it('is put into words when the keys or the bucket are wrong', async () => {
    const stranger = createS3Storage({ ...target.config, secretAccessKey: 'not the secret' })
    await expect(stranger.readBuffer('x')).rejects.toMatchObject({ code: 'unavailable', message: expect.stringContaining('keys') })
    const lost = createS3Storage({ ...target.config, bucket: 'no-such-bucket-here' })
    await expect(lost.ping()).rejects.toMatchObject({ code: 'unavailable', message: expect.stringContaining('bucket') })
    await expect(lost.write('x', 'y', 'text/plain')).rejects.toMatchObject({ message: expect.stringContaining('bucket') })
    stranger.close()
    lost.close()
  })

  it('does not come when all is well', async () => {
    await expect(storage.ping()).resolves.toBeUndefined()
  })
})
