import { createServer, type IncomingMessage } from 'node:http'
import type { AddressInfo } from 'node:net'
import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { S3Error } from '../../../../../workers/local/storage/errors'
import { parseRequest, type S3Request } from '../../../../../workers/local/storage/request'
import { uriEncode, verifyRequest } from '../../../../../workers/local/storage/signature'
import { presign, sendRaw, sha256Hex, signHeaders, targetOf, type PlainRequest } from '../../../../support/s3Signing'

/** Source of the vectors: the official signer, @smithy/signature-v4, computed anew for every case. */
const keys = { accessKeyId: 'AKIDEXAMPLE', secretAccessKey: 'wJalrXUtnFEMI/K7MDENG+bPxRfiCYEXAMPLEKEY', region: 'eu-west-2' }
const now = new Date('2026-03-04T10:20:30Z')
const nowMs = now.getTime()

/** As the server would see it, without a socket. */
function received(request: PlainRequest): S3Request {
  const headersDistinct = Object.fromEntries(Object.entries(request.headers).map(([name, value]) => [name.toLowerCase(), [value]]))
  return parseRequest({ method: request.method, url: targetOf(request), headersDistinct } as unknown as IncomingMessage)
}

function refusal(request: PlainRequest, atMs = nowMs, credentials = keys): string {
  try {
    verifyRequest(received(request), credentials, atMs)
  }
  catch (error) {
    return (error as S3Error).code
  }
  return 'accepted'
}

const put: PlainRequest = {
  method: 'PUT',
  path: '/bucket/photos/%C3%A9t%C3%A9%20%281%29%2B%26.jpg',
  query: { 'partNumber': '3', 'uploadId': 'a/b+c d', 'x-id': 'UploadPart' },
  headers: { 'host': '127.0.0.1:9000', 'content-type': 'image/jpeg', 'x-amz-meta-note': '  two   spaces ', 'x-amz-content-sha256': sha256Hex('hello') },
}

describe('signature in the header', () => {
  it('accepts what the official signer signs and learns the hash of the body', async () => {
    const signed = await signHeaders(put, keys, now)
    expect(verifyRequest(received(signed), keys, nowMs)).toEqual({ kind: 'sha256', hex: sha256Hex('hello') })
  })

  it('accepts any key and query', async () => {
    const text = fc.string({ unit: 'grapheme', minLength: 1, maxLength: 20 })
    await fc.assert(fc.asyncProperty(text, fc.dictionary(text.filter(name => !name.startsWith('X-Amz-') && !name.startsWith('__')), text, { maxKeys: 4 }), async (key, query) => {
      const request = { ...put, path: `/bucket/${uriEncode(key, true)}`, query }
      expect(refusal(await signHeaders(request, keys, now))).toBe('accepted')
    }), { numRuns: 60 })
  })

  it.each<[string, (signed: PlainRequest) => PlainRequest]>([
    ['the method', signed => ({ ...signed, method: 'DELETE' })],
    ['the path', signed => ({ ...signed, path: '/bucket/other.jpg' })],
    ['the query', signed => ({ ...signed, query: { ...signed.query!, partNumber: '4' } })],
    ['an added parameter', signed => ({ ...signed, query: { ...signed.query!, acl: '' } })],
    ['the host', signed => ({ ...signed, headers: { ...signed.headers, host: 'elsewhere:9000' } })],
    ['a signed header', signed => ({ ...signed, headers: { ...signed.headers, 'content-type': 'text/html' } })],
    ['the hash of the body', signed => ({ ...signed, headers: { ...signed.headers, 'x-amz-content-sha256': sha256Hex('other') } })],
    ['the signature', signed => ({ ...signed, headers: { ...signed.headers, authorization: signed.headers.authorization!.replace(/.$/, c => (c === '0' ? '1' : '0')) } })],
    ['the order of signed headers', signed => ({ ...signed, headers: { ...signed.headers, authorization: signed.headers.authorization!.replace('content-type;host', 'host;content-type') } })],
  ])('refuses when %s changed', async (_, change) => {
    expect(refusal(change(await signHeaders(put, keys, now)))).toBe('SignatureDoesNotMatch')
  })

  it('refuses x-amz- headers that were added afterwards', async () => {
    const signed = await signHeaders(put, keys, now)
    expect(refusal({ ...signed, headers: { ...signed.headers, 'x-amz-acl': 'private' } })).toBe('AccessDenied')
  })

  it('refuses strangers, other regions and wrong secrets', async () => {
    const signed = await signHeaders(put, keys, now)
    expect(refusal(signed, nowMs, { ...keys, accessKeyId: 'SOMEONEELSE' })).toBe('InvalidAccessKeyId')
    expect(refusal(signed, nowMs, { ...keys, region: 'eu-west-1' })).toBe('AuthorizationHeaderMalformed')
    expect(refusal(signed, nowMs, { ...keys, secretAccessKey: 'another secret' })).toBe('SignatureDoesNotMatch')
    expect(refusal({ ...put, headers: { host: 'x' } })).toBe('AccessDenied')
  })

  it('refuses clocks that are more than 15 minutes apart', async () => {
    const signed = await signHeaders(put, keys, now)
    expect(refusal(signed, nowMs + 14 * 60_000)).toBe('accepted')
    expect(refusal(signed, nowMs + 16 * 60_000)).toBe('RequestTimeTooSkewed')
    expect(refusal(signed, nowMs - 16 * 60_000)).toBe('RequestTimeTooSkewed')
  })

  it('refuses a header it cannot read', async () => {
    const signed = await signHeaders(put, keys, now)
    const withAuthorization = (authorization: string) => ({ ...signed, headers: { ...signed.headers, authorization } })
    expect(refusal(withAuthorization('AWS4-HMAC-SHA256 nonsense'))).toBe('AuthorizationHeaderMalformed')
    expect(refusal(withAuthorization('AWS somekey:somesignature'))).toBe('InvalidRequest')
    expect(refusal(withAuthorization(signed.headers.authorization!.replace('/s3/', '/ec2/')))).toBe('AuthorizationHeaderMalformed')
  })
})

describe('signature in the query', () => {
  const get: PlainRequest = { method: 'GET', path: '/bucket/clip.mp4', query: { 'response-content-disposition': 'attachment; filename="a b.mp4"' }, headers: { host: '127.0.0.1:9000' } }

  it('accepts a presigned address until it expires', async () => {
    const signed = await presign(get, keys, 3600, now)
    expect(verifyRequest(received(signed), keys, nowMs)).toEqual({ kind: 'unsigned' })
    expect(refusal(signed, nowMs + 3600_000)).toBe('accepted')
    expect(refusal(signed, nowMs + 3601_000)).toBe('AccessDenied')
    expect(refusal(signed, nowMs - 16 * 60_000)).toBe('AccessDenied')
  })

  it('does not let the life of an address be prolonged', async () => {
    const signed = await presign(get, keys, 60, now)
    const prolonged = (expires: string) => ({ ...signed, query: { ...signed.query!, 'X-Amz-Expires': expires } })
    expect(refusal(prolonged('3600'))).toBe('SignatureDoesNotMatch')
    expect(refusal(prolonged('9999999'))).toBe('AuthorizationQueryParametersError')
    expect(refusal(prolonged('-1'))).toBe('AuthorizationQueryParametersError')
  })

  it('refuses another method, key or disposition', async () => {
    const signed = await presign(get, keys, 60, now)
    expect(refusal({ ...signed, method: 'DELETE' })).toBe('SignatureDoesNotMatch')
    expect(refusal({ ...signed, path: '/bucket/clip2.mp4' })).toBe('SignatureDoesNotMatch')
    expect(refusal({ ...signed, query: { ...signed.query!, 'response-content-disposition': 'inline' } })).toBe('SignatureDoesNotMatch')
  })

  it('refuses doubled and missing fields and two ways at once', async () => {
    const signed = await presign(get, keys, 60, now)
    const doubled = received(signed)
    doubled.query.push(['X-Amz-Expires', '60'])
    expect(() => verifyRequest(doubled, keys, nowMs)).toThrow(/exactly once/)
    const { 'X-Amz-Signature': _, ...unsigned } = signed.query!
    expect(refusal({ ...signed, query: unsigned })).toBe('AuthorizationQueryParametersError')
    expect(refusal({ ...signed, headers: { ...signed.headers, authorization: 'AWS4-HMAC-SHA256 x' } })).toBe('InvalidRequest')
  })
})

describe('over a socket', () => {
  const server = createServer((message, response) => {
    try {
      verifyRequest(parseRequest(message), keys, nowMs)
      response.end('<Code>accepted</Code>')
    }
    catch (error) {
      response.end(`<Code>${(error as S3Error).code}</Code>`)
    }
  })
  beforeAll(() => new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve)))
  afterAll(() => new Promise(resolve => server.close(resolve)))

  it('sees the path as it was sent, dots and all', async () => {
    const host = `127.0.0.1:${(server.address() as AddressInfo).port}`
    const signed = await signHeaders({ ...put, path: '/bucket/../../etc/passwd', headers: { ...put.headers, host } }, keys, now)
    expect((await sendRaw(`http://${host}`, signed)).code).toBe('accepted')
    expect((await sendRaw(`http://${host}`, { ...signed, path: '/etc/passwd' })).code).toBe('SignatureDoesNotMatch')
  })
})
