import { randomBytes } from 'node:crypto'
import { readdir } from 'node:fs/promises'
import { connect } from 'node:net'
import { dirname, join } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { presign, sendRaw, sha256Hex, signHeaders, targetOf, type PlainRequest } from '../../support/s3Signing'
import { isOutsideTarget, openS3Target, type S3Target } from '../../support/s3Target'

/** Requests that no honest client sends, by raw sockets; and presigned addresses as browsers use them. */
let target: S3Target
let base: string
beforeAll(async () => {
  target = await openS3Target()
  base = `/${target.config.bucket}`
  await target.storage.write('kept', 'kept as it is', 'text/plain')
})
afterAll(async () => {
  expect((await target.storage.readBuffer('kept')).toString()).toBe('kept as it is')
  await target.stop()
})

const request = (method: string, path: string, query: Record<string, string> = {}, body: string | Buffer = '', headers: Record<string, string> = {}): PlainRequest =>
  ({ method, path, query, headers: { 'host': target.host, 'x-amz-content-sha256': sha256Hex(body), ...headers } })
async function send(method: string, path: string, query: Record<string, string> = {}, body: string | Buffer = '', headers: Record<string, string> = {}) {
  return sendRaw(target.config.endpoint, await signHeaders(request(method, path, query, body, headers), target.config), body)
}
const address = (signed: PlainRequest) => target.config.endpoint + targetOf(signed)
const bare = (method: string, path: string, query: Record<string, string> = {}): PlainRequest => ({ method, path, query, headers: { host: target.host } })

describe('who asks', () => {
  it('must sign', async () => {
    for (const method of ['GET', 'PUT', 'DELETE']) {
      expect(await sendRaw(target.config.endpoint, bare(method, `${base}/kept`), 'x')).toMatchObject({ status: 403, code: 'AccessDenied' })
    }
    expect((await sendRaw(target.config.endpoint, bare('GET', base, { 'list-type': '2' }))).status).toBe(403)
  })

  it('must hold the right keys', async () => {
    const wrongSecret = await signHeaders(request('GET', `${base}/kept`), { ...target.config, secretAccessKey: 'guessed secret' })
    expect(await sendRaw(target.config.endpoint, wrongSecret)).toMatchObject({ status: 403, code: 'SignatureDoesNotMatch' })
    const stranger = await signHeaders(request('GET', `${base}/kept`), { ...target.config, accessKeyId: 'STRANGER' })
    expect(await sendRaw(target.config.endpoint, stranger)).toMatchObject({ status: 403, code: 'InvalidAccessKeyId' })
  })

  it('may not change what was signed', async () => {
    const signed = await signHeaders(request('GET', `${base}/other`), target.config)
    expect(await sendRaw(target.config.endpoint, { ...signed, path: `${base}/kept` })).toMatchObject({ status: 403, code: 'SignatureDoesNotMatch' })
    expect(await sendRaw(target.config.endpoint, { ...signed, method: 'DELETE' })).toMatchObject({ status: 403, code: 'SignatureDoesNotMatch' })
  })

  it('may not replay an old request', async () => {
    const old = await signHeaders(request('GET', `${base}/kept`), target.config, new Date(Date.now() - 3600_000))
    expect(await sendRaw(target.config.endpoint, old)).toMatchObject({ status: 403, code: 'RequestTimeTooSkewed' })
  })
})

describe('presigned addresses', () => {
  it('serve fetch()', async () => {
    const answer = await fetch(await target.storage.presignGet('kept', { contentType: 'text/x-note', downloadName: 'é "1".txt' }), { headers: { range: 'bytes=5-6' } })
    expect([answer.status, await answer.text(), answer.headers.get('content-type')]).toEqual([206, 'as', 'text/x-note'])
    expect(answer.headers.get('content-disposition')).toContain('filename*=UTF-8\'\'%C3%A9%20%221%22.txt')
  })

  it('end with their time, and cannot be prolonged', async () => {
    const fresh = await presign(bare('GET', `${base}/kept`), target.config, 60, new Date(Date.now() - 30_000))
    expect((await fetch(address(fresh))).status).toBe(200)
    const old = await presign(bare('GET', `${base}/kept`), target.config, 60, new Date(Date.now() - 120_000))
    expect((await fetch(address(old))).status).toBe(403)
    expect((await fetch(address({ ...old, query: { ...old.query!, 'X-Amz-Expires': '3600' } }))).status).toBe(403)
  })

  it('are good for one key, part and method', async () => {
    const uploadId = await target.storage.beginUpload('parts', 'video/mp4')
    const url = await target.storage.presignPart('parts', uploadId, 1, 60)
    for (const changed of [url.replace('partNumber=1', 'partNumber=2'), url.replace('/parts?', '/kept?')]) {
      expect((await fetch(changed, { method: 'PUT', body: 'x' })).status).toBe(403)
    }
    expect((await fetch(url, { method: 'DELETE' })).status).toBe(403)
    const sent = await fetch(url, { method: 'PUT', body: 'x', headers: { origin: 'https://site.example' } })
    expect([sent.status, sent.headers.get('etag')]).toEqual([200, '"9dd4e461268c8034f5c8564e155c67a6"'])
    expect(sent.headers.get('access-control-expose-headers')?.toLowerCase()).toContain('etag')
    await target.storage.abortUpload('parts', uploadId)
  })
})

describe('browsers from elsewhere', () => {
  it('may ask first, and only the site is let in', async () => {
    const preflight = (origin: string, method = 'PUT') => fetch(`${target.config.endpoint}${base}/kept?partNumber=1`, { method: 'OPTIONS', headers: { origin, 'access-control-request-method': method, 'access-control-request-headers': 'content-type' } })
    const welcome = await preflight('https://site.example')
    expect([welcome.status, welcome.headers.get('access-control-allow-origin'), welcome.headers.get('access-control-allow-headers')]).toEqual([200, 'https://site.example', 'content-type'])
    expect((await preflight('https://evil.example')).status).toBe(403)
    expect((await preflight('https://site.example', 'DELETE')).status).toBe(403)
    const plain = await fetch(await target.storage.presignGet('kept'), { headers: { origin: 'https://evil.example' } })
    expect(plain.headers.get('access-control-allow-origin')).toBeNull()
  })
})

describe('paths', () => {
  it('in keys lead nowhere', async () => {
    const name = `escape-${randomBytes(6).toString('hex')}`
    for (const key of [`../../${name}`, `a/../../../${name}`, `%2e%2e/%2e%2e/${name}`, `..%5c..%5c${name}`, `%2ftmp%2f${name}`]) {
      expect([200, 400, 403]).toContain((await send('PUT', `${base}/${key}`, {}, 'x')).status)
    }
    expect((await send('PUT', `/..${base}/x`, {}, 'x')).status).toBeGreaterThanOrEqual(400)
    if (target.dataDir) {
      for (const folder of [dirname(target.dataDir), target.dataDir, join(target.dataDir, 'buckets'), '/tmp', '/']) expect((await readdir(folder)).join(' ')).not.toContain(name)
    }
  })

  it('in upload ids lead nowhere', async () => {
    for (const uploadId of ['../..', '../../tmp', '..%2f..', '/', '.', '__proto__', 'constructor', '0'.repeat(32)]) {
      expect(await send('PUT', `${base}/up`, { partNumber: '1', uploadId }, 'x')).toMatchObject({ status: 404, code: 'NoSuchUpload' })
      expect(await send('GET', `${base}/up`, { uploadId })).toMatchObject({ status: 404, code: 'NoSuchUpload' })
      expect(await send('DELETE', `${base}/up`, { uploadId })).toMatchObject({ status: 404, code: 'NoSuchUpload' })
      const xml = '<CompleteMultipartUpload><Part><PartNumber>1</PartNumber><ETag>"x"</ETag></Part></CompleteMultipartUpload>'
      expect(await send('POST', `${base}/up`, { uploadId }, xml)).toMatchObject({ status: 404, code: 'NoSuchUpload' })
    }
  })

  it('that cannot be decoded are refused', async () => {
    expect((await sendRaw(target.config.endpoint, { ...request('GET', `${base}/%zz`), headers: { host: target.host } })).status).toBe(400)
  })
})

describe('bodies', () => {
  it('must be what was signed', async () => {
    const signed = await signHeaders(request('PUT', `${base}/kept`, {}, 'signed'), target.config)
    expect(await sendRaw(target.config.endpoint, signed, 'forged')).toMatchObject({ status: 400, code: 'XAmzContentSHA256Mismatch' })
  })

  it('need a length', async () => {
    const signed = await signHeaders(request('PUT', `${base}/kept`, {}, 'x'), target.config)
    expect(await sendRaw(target.config.endpoint, { ...signed, headers: { ...signed.headers, 'transfer-encoding': 'chunked' } }, 'x')).toMatchObject({ status: 411 })
  })

  it.each([
    ['a chunk that is cut short', '5\r\nhel'],
    ['fewer bytes than announced', '3\r\nhel\r\n0\r\nx-amz-checksum-crc32:NhCmhg==\r\n\r\n'],
    ['a wrong checksum', '5\r\nhello\r\n0\r\nx-amz-checksum-crc32:AAAAAA==\r\n\r\n'],
    ['no checksum', '5\r\nhello\r\n0\r\n\r\n'],
    ['nonsense', 'hello'],
  ])('in chunks are refused with %s', async (_, body) => {
    const headers = { 'x-amz-content-sha256': 'STREAMING-UNSIGNED-PAYLOAD-TRAILER', 'x-amz-trailer': 'x-amz-checksum-crc32', 'x-amz-decoded-content-length': '5', 'content-encoding': 'aws-chunked' }
    expect((await send('PUT', `${base}/kept`, {}, body, headers)).status).toBe(400)
  })

  it('that stop midway change nothing', async () => {
    const signed = await signHeaders(request('PUT', `${base}/kept`, {}, '', { 'x-amz-content-sha256': 'UNSIGNED-PAYLOAD' }), target.config)
    const { hostname, port } = new URL(target.config.endpoint)
    const socket = connect(Number(port), hostname)
    const head = Object.entries({ ...signed.headers, 'content-length': '5000000' }).map(([name, value]) => `${name}: ${value}\r\n`).join('')
    socket.write(`PUT ${signed.path} HTTP/1.1\r\n${head}\r\n`)
    await new Promise(resolve => socket.write(randomBytes(2_000_000), resolve))
    socket.destroy()
    await pause(50)
    expect((await target.storage.readBuffer('kept')).toString()).toBe('kept as it is')
    if (target.dataDir) await expect.poll(() => readdir(join(target.dataDir!, 'tmp'))).toEqual([])
  })

  it('are not asked for when the request is refused', async () => {
    const { hostname, port } = new URL(target.config.endpoint)
    const socket = connect(Number(port), hostname)
    socket.write(`PUT ${base}/kept HTTP/1.1\r\nhost: ${target.host}\r\ncontent-length: 5000000\r\nexpect: 100-continue\r\n\r\n`)
    const answer = await new Promise<Buffer>(resolve => socket.once('data', resolve))
    socket.destroy()
    expect(answer.toString()).toMatch(/^HTTP\/1\.1 403/)
  })

  it.each([
    ['an outside entity', '<!DOCTYPE a [<!ENTITY x SYSTEM "file:///etc/passwd">]><CompleteMultipartUpload><Part><PartNumber>1</PartNumber><ETag>&x;</ETag></Part></CompleteMultipartUpload>'],
    ['another document', '<Delete/>'],
    ['no document', 'hello'],
    ['broken UTF-8', Buffer.from([0x3C, 0x61, 0xFF, 0x3E])],
  ])('for Complete are refused with %s', async (_, xml) => {
    const uploadId = await target.storage.beginUpload('xml', 'video/mp4')
    expect(await send('POST', `${base}/xml`, { uploadId }, xml)).toMatchObject({ status: 400, code: 'MalformedXML' })
    await target.storage.abortUpload('xml', uploadId)
  })
})

describe('readers', () => {
  it('that leave or stall midway leave others and overwriting alone', async () => {
    const [first, second] = [randomBytes(8 * 1024 ** 2), randomBytes(1000)]
    await target.storage.write('long', first, 'video/mp4')
    const url = await target.storage.presignGet('long')
    const left = new AbortController()
    const leaving = await fetch(url, { signal: left.signal })
    left.abort()
    await expect(leaving.arrayBuffer()).rejects.toThrow()
    const stalled = await fetch(url)
    await target.storage.write('long', second, 'video/mp4')
    expect((await target.storage.readBuffer('long')).equals(second)).toBe(true)
    expect(Buffer.from(await stalled.arrayBuffer()).equals(first)).toBe(true)
  })
})

describe.skipIf(isOutsideTarget)('our own server', () => {
  it('refuses what it does not do, instead of doing something else', async () => {
    expect(await send('PUT', `${base}/kept`, { acl: '' }, '<x/>')).toMatchObject({ status: 501, code: 'NotImplemented' })
    expect(await send('DELETE', base, { policy: '' })).toMatchObject({ status: 501 })
    expect(await send('GET', `${base}/kept`, { versionId: '1' })).toMatchObject({ status: 501 })
    expect(await send('PUT', `${base}/kept`, {}, 'x', { 'x-amz-acl': 'public-read' })).toMatchObject({ status: 501 })
    expect(await send('PUT', `${base}/kept`, {}, 'x', { 'x-amz-checksum-crc64nvme': 'AAAAAAAAAAA=' })).toMatchObject({ status: 501 })
    expect((await send('PATCH', `${base}/kept`)).status).toBe(405)
    expect((await send('PUT', `${base}/with%00null`, {}, 'x')).status).toBe(400)
  })

  it('lets no header be smuggled into an answer', async () => {
    expect((await send('GET', `${base}/kept`, { 'response-content-disposition': 'a\r\nset-cookie: b=c' })).status).toBe(400)
  })

  it('shortens open ranges for media elements only', async () => {
    const size = 3 * 1024 ** 2
    await target.storage.write('film', randomBytes(size), 'video/mp4')
    const url = await target.storage.presignGet('film')
    const lengthFor = async (headers: Record<string, string>) => {
      const answer = await sendRaw(target.config.endpoint, { method: 'GET', path: url.slice(target.config.endpoint.length), headers: { host: target.host, ...headers } })
      return [answer.status, answer.body.length, answer.headers['content-range'], answer.headers['cache-control']]
    }
    expect(await lengthFor({ 'range': 'bytes=100-', 'sec-fetch-dest': 'video' })).toEqual([206, 1024 ** 2, `bytes 100-${100 + 1024 ** 2 - 1}/${size}`, 'no-store'])
    expect(await lengthFor({ range: 'bytes=100-' })).toEqual([206, size - 100, `bytes 100-${size - 1}/${size}`, 'private, max-age=3600'])
    expect(await lengthFor({ 'sec-fetch-dest': 'video' })).toEqual([200, size, undefined, 'no-store'])
  })
})
