import { crc32 } from 'node:zlib'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { decodeChunked } from '../../../../../workers/local/storage/chunked'
import { parseRequest } from '../../../../../workers/local/storage/request'
import { verifyRequest, type ChunkChain } from '../../../../../workers/local/storage/signature'
import { sha256Hex, signerFor, signHeaders } from '../../../../support/s3Signing'
import type { IncomingMessage } from 'node:http'

const keys = { accessKeyId: 'AKIDEXAMPLE', secretAccessKey: 'secretsecret', region: 'us-east-1' }
const now = new Date('2026-03-04T10:20:30Z')
const stamp = '20260304T102030Z'
const scope = '20260304/us-east-1/s3/aws4_request'

async function* inPieces(bytes: Buffer, size: number): AsyncGenerator<Buffer> {
  for (let at = 0; at < bytes.length; at += size) yield bytes.subarray(at, at + size)
}

async function decodeAll(wire: Buffer, options: { chain?: ChunkChain | null, trailer?: boolean, decodedLength: number }, pieceSize = 7) {
  const trailers = new Map<string, string>()
  const out: Buffer[] = []
  const decoded = decodeChunked(inPieces(wire, pieceSize), {
    chain: options.chain ?? null,
    trailer: options.trailer ?? false,
    decodedLength: options.decodedLength,
    onTrailers: found => found.forEach((value, name) => trailers.set(name, value)),
  })
  for await (const piece of decoded) out.push(Buffer.from(piece))
  return { body: Buffer.concat(out), trailers }
}

/** A signed body by the official signer: the seed from the headers, then a signature for each chunk. */
async function signedBody(chunks: string[], trailer: string | null) {
  const hash = `STREAMING-AWS4-HMAC-SHA256-PAYLOAD${trailer ? '-TRAILER' : ''}`
  const request = await signHeaders({ method: 'PUT', path: '/bucket/key', headers: { 'host': 'localhost', 'x-amz-content-sha256': hash } }, keys, now)
  const headersDistinct = Object.fromEntries(Object.entries(request.headers).map(([name, value]) => [name, [value]]))
  const payload = verifyRequest(parseRequest({ method: 'PUT', url: '/bucket/key', headersDistinct } as unknown as IncomingMessage), keys, now.getTime())
  let previous = /Signature=(\w+)/.exec(request.headers.authorization!)![1]!
  let wire = ''
  for (const chunk of [...chunks, '']) {
    previous = await signerFor(keys).sign(['AWS4-HMAC-SHA256-PAYLOAD', stamp, scope, previous, sha256Hex(''), sha256Hex(chunk)].join('\n'), { signingDate: now })
    wire += `${Buffer.byteLength(chunk).toString(16)};chunk-signature=${previous}\r\n${chunk}${chunk ? '\r\n' : ''}`
  }
  if (trailer) {
    previous = await signerFor(keys).sign(['AWS4-HMAC-SHA256-TRAILER', stamp, scope, previous, sha256Hex(`${trailer}\n`)].join('\n'), { signingDate: now })
    wire += `${trailer}\r\nx-amz-trailer-signature:${previous}\r\n`
  }
  if (payload.kind !== 'chunked') throw new Error('expected a chunked payload')
  return { wire: Buffer.from(`${wire}\r\n`), chain: payload.chain }
}

describe('unsigned chunks with a trailer', () => {
  const text = 'hello, wide world'
  const crc = Buffer.alloc(4)
  crc.writeUInt32BE(crc32(text))
  const wire = Buffer.from(`5\r\nhello\r\nc\r\n, wide world\r\n0\r\nx-amz-checksum-crc32:${crc.toString('base64')}\r\n\r\n`)

  it('gives the data and the trailer, wherever the network cuts', async () => {
    for (const size of [1, 2, 3, 8, 1000]) {
      const { body, trailers } = await decodeAll(wire, { trailer: true, decodedLength: text.length }, size)
      expect(body.toString()).toBe(text)
      expect(trailers.get('x-amz-checksum-crc32')).toBe(crc.toString('base64'))
    }
  })

  it('gives back any data in any chunks', async () => {
    await fc.assert(fc.asyncProperty(fc.array(fc.uint8Array({ minLength: 1, maxLength: 300 }), { maxLength: 8 }), fc.integer({ min: 1, max: 400 }), async (chunks, size) => {
      const parts = chunks.flatMap(chunk => [Buffer.from(`${chunk.length.toString(16)}\r\n`), Buffer.from(chunk), Buffer.from('\r\n')])
      const whole = Buffer.concat(chunks.map(chunk => Buffer.from(chunk)))
      const { body } = await decodeAll(Buffer.concat([...parts, Buffer.from('0\r\n\r\n')]), { decodedLength: whole.length }, size)
      expect(body.equals(whole)).toBe(true)
    }), { numRuns: 50 })
  })

  it('refuses every truncation', async () => {
    for (let length = 0; length < wire.length; length++) {
      await expect(decodeAll(wire.subarray(0, length), { trailer: true, decodedLength: text.length })).rejects.toThrow()
    }
  })

  it.each([
    ['more data than announced', '6\r\nhello!\r\n0\r\n\r\n', 5],
    ['less data than announced', '4\r\nhell\r\n0\r\n\r\n', 5],
    ['a size that is no number', 'zz\r\nhello\r\n0\r\n\r\n', 5],
    ['a negative size', '-5\r\nhello\r\n0\r\n\r\n', 5],
    ['a chunk longer than its header', '4\r\nhello\r\n0\r\n\r\n', 4],
    ['bytes after the end', '5\r\nhello\r\n0\r\n\r\nmore', 5],
    ['bare line feeds', '5\nhello\n0\n\n', 5],
    ['a trailer that was not announced', '5\r\nhello\r\n0\r\na:b\r\n\r\n', 5],
    ['an endless header', 'a'.repeat(10_000), 5],
  ])('refuses %s', async (_, body, decodedLength) => {
    await expect(decodeAll(Buffer.from(body), { decodedLength })).rejects.toMatchObject({ name: 'S3Error', status: 400 })
  })
})

describe('signed chunks', () => {
  it('accepts the chain of the official signer', async () => {
    const { wire, chain } = await signedBody(['first chunk, ', 'second'], null)
    expect((await decodeAll(wire, { chain, decodedLength: 19 })).body.toString()).toBe('first chunk, second')
  })

  it('accepts a signed trailer', async () => {
    const { wire, chain } = await signedBody(['abc'], 'x-amz-checksum-crc32:NSRBwg==')
    const { trailers } = await decodeAll(wire, { chain, trailer: true, decodedLength: 3 })
    expect(trailers.get('x-amz-checksum-crc32')).toBe('NSRBwg==')
  })

  it.each([
    ['data', 'second', 'Second'],
    ['a signature', 'chunk-signature=', 'chunk-signature=0'],
    ['the trailer', 'NSRBwg==', 'NSRBwQ=='],
  ])('refuses when %s changed', async (_, from, to) => {
    const { wire, chain } = await signedBody(['first', 'second'], 'x-amz-checksum-crc32:NSRBwg==')
    const changed = Buffer.from(wire.toString().replace(from, to))
    await expect(decodeAll(changed, { chain, trailer: true, decodedLength: 11 })).rejects.toThrow()
  })

  it('refuses chunks without their signature', async () => {
    const { chain } = await signedBody(['abc'], null)
    await expect(decodeAll(Buffer.from('3\r\nabc\r\n0\r\n\r\n'), { chain, decodedLength: 3 })).rejects.toMatchObject({ code: 'SignatureDoesNotMatch' })
  })
})
