import { createHash, createHmac, timingSafeEqual } from 'node:crypto'
import { accessDenied, invalidRequest, S3Error, signatureMismatch } from './errors'
import type { S3Request } from './request'

/**
 * AWS Signature Version 4, the receiving side: in the Authorization header, in the query
 * (presigned), and the chain of chunk signatures of `aws-chunked` bodies.
 * Source: AWS General Reference, "Signature Version 4"; Amazon S3 API Reference, "Authenticating requests".
 */
const ALGORITHM = 'AWS4-HMAC-SHA256'
const EMPTY_SHA256 = createHash('sha256').digest('hex')
const MAX_SKEW_MS = 15 * 60 * 1000
const MAX_EXPIRES_S = 7 * 24 * 3600

export interface Credentials { accessKeyId: string, secretAccessKey: string, region: string }

/** What the signature says about the body. */
export type Payload
  = | { kind: 'unsigned' }
    | { kind: 'sha256', hex: string }
    | { kind: 'chunked', chain: ChunkChain | null, trailer: boolean }

const hmac = (key: string | Buffer, text: string) => createHmac('sha256', key).update(text, 'utf8').digest()
const sha256 = (text: string) => createHash('sha256').update(text, 'utf8').digest('hex')

function sameText(a: string, b: string): boolean {
  const [left, right] = [Buffer.from(a), Buffer.from(b)]
  return left.length === right.length && timingSafeEqual(left, right)
}

export function uriEncode(text: string, keepSlash = false): string {
  const encoded = encodeURIComponent(text).replace(/[!'()*]/g, c => `%${c.charCodeAt(0).toString(16).toUpperCase()}`)
  return keepSlash ? encoded.replaceAll('%2F', '/') : encoded
}

function canonicalQuery(query: [string, string][]): string {
  return query
    .filter(([name]) => name !== 'X-Amz-Signature')
    .map(([name, value]) => [uriEncode(name), uriEncode(value)] as const)
    .sort((a, b) => (a[0] === b[0] ? compare(a[1], b[1]) : compare(a[0], b[0])))
    .map(([name, value]) => `${name}=${value}`)
    .join('&')
}

function compare(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0
}

function canonicalRequest(request: S3Request, signedHeaders: string[], payloadHash: string): string {
  const headers = signedHeaders.map(name => `${name}:${(request.headers[name] ?? '').trim().replace(/\s+/g, ' ')}\n`)
  return [
    request.method, uriEncode(request.path, true), canonicalQuery(request.query),
    headers.join(''), signedHeaders.join(';'), payloadHash,
  ].join('\n')
}

function signingKey(credentials: Credentials, day: string): Buffer {
  return hmac(hmac(hmac(hmac(`AWS4${credentials.secretAccessKey}`, day), credentials.region), 's3'), 'aws4_request')
}

/** `20260105T101500Z` as milliseconds since 1970, NaN when it is not that form. */
function parseStamp(stamp: string): number {
  const m = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(stamp)
  return m ? Date.parse(`${m[1]}-${m[2]}-${m[3]}T${m[4]}:${m[5]}:${m[6]}Z`) : Number.NaN
}

interface Claim { credential: string, stamp: string, signedHeaders: string[], signature: string, payloadHash: string }

function claimFromHeader(request: S3Request, authorization: string): Claim {
  const malformed = () => new S3Error(400, 'AuthorizationHeaderMalformed', 'The authorization header is malformed.')
  if (!authorization.startsWith(`${ALGORITHM} `)) throw invalidRequest(`Only ${ALGORITHM} authorization is supported.`)
  const fields = new Map(authorization.slice(ALGORITHM.length + 1).split(',').map((field) => {
    const at = field.indexOf('=')
    return [field.slice(0, Math.max(at, 0)).trim(), field.slice(at + 1).trim()] as const
  }))
  const [credential, signed, signature] = [fields.get('Credential'), fields.get('SignedHeaders'), fields.get('Signature')]
  if (!credential || !signed || !signature || fields.size !== 3) throw malformed()
  const payloadHash = request.headers['x-amz-content-sha256']
  if (!payloadHash) throw invalidRequest('Missing required header for this request: x-amz-content-sha256')
  return { credential, stamp: request.headers['x-amz-date'] ?? '', signedHeaders: signed.split(';'), signature, payloadHash }
}

const QUERY_FIELDS = ['X-Amz-Algorithm', 'X-Amz-Credential', 'X-Amz-Date', 'X-Amz-Expires', 'X-Amz-SignedHeaders', 'X-Amz-Signature']

function claimFromQuery(request: S3Request): Claim & { expiresSeconds: number } {
  for (const name of QUERY_FIELDS) {
    if (request.query.filter(([key]) => key === name).length !== 1) {
      throw new S3Error(400, 'AuthorizationQueryParametersError', `Query authentication needs ${name} exactly once.`)
    }
  }
  const field = (name: string) => request.param(name) ?? ''
  const expires = field('X-Amz-Expires')
  if (field('X-Amz-Algorithm') !== ALGORITHM) throw new S3Error(400, 'AuthorizationQueryParametersError', `X-Amz-Algorithm only supports "${ALGORITHM}".`)
  if (!/^\d{1,6}$/.test(expires) || Number(expires) > MAX_EXPIRES_S) {
    throw new S3Error(400, 'AuthorizationQueryParametersError', `X-Amz-Expires must be a number of seconds up to ${MAX_EXPIRES_S}.`)
  }
  return {
    credential: field('X-Amz-Credential'),
    stamp: field('X-Amz-Date'),
    signedHeaders: field('X-Amz-SignedHeaders').split(';'),
    signature: field('X-Amz-Signature'),
    payloadHash: field('X-Amz-Content-Sha256') || request.headers['x-amz-content-sha256'] || 'UNSIGNED-PAYLOAD',
    expiresSeconds: Number(expires),
  }
}

/**
 * Checks who asks and that nothing was changed on the way. Throws S3Error; returns what is known
 * of the body, which must be checked while it is read.
 */
export function verifyRequest(request: S3Request, credentials: Credentials, nowMs = Date.now()): Payload {
  const authorization = request.headers.authorization
  const inQuery = request.query.some(([name]) => name.startsWith('X-Amz-'))
  if (authorization !== undefined && inQuery) throw invalidRequest('Only one auth mechanism allowed.')
  if (authorization === undefined && !inQuery) throw accessDenied()
  const presigned = inQuery ? claimFromQuery(request) : null
  const claim = presigned ?? claimFromHeader(request, authorization!)

  const [accessKeyId, day, region, service, terminator, ...rest] = claim.credential.split('/')
  if (service !== 's3' || terminator !== 'aws4_request' || rest.length) throw new S3Error(400, 'AuthorizationHeaderMalformed', 'The credential scope is malformed.')
  if (!sameText(accessKeyId ?? '', credentials.accessKeyId)) throw new S3Error(403, 'InvalidAccessKeyId', 'The access key ID you provided does not exist in our records.')
  if (region !== credentials.region) throw new S3Error(400, 'AuthorizationHeaderMalformed', `The region is wrong; expecting '${credentials.region}'.`)

  const signedAtMs = parseStamp(claim.stamp)
  if (Number.isNaN(signedAtMs) || !claim.stamp.startsWith(day!)) throw accessDenied('A valid X-Amz-Date matching the credential scope is required.')
  if (presigned) {
    if (signedAtMs > nowMs + MAX_SKEW_MS) throw accessDenied('Request is not valid yet.')
    if (signedAtMs + presigned.expiresSeconds * 1000 < nowMs) throw accessDenied('Request has expired.')
  }
  else if (Math.abs(signedAtMs - nowMs) > MAX_SKEW_MS) {
    throw new S3Error(403, 'RequestTimeTooSkewed', 'The difference between the request time and the current time is too large.')
  }

  requireSigned(request, claim.signedHeaders)
  const scope = `${day}/${region}/s3/aws4_request`
  const key = signingKey(credentials, day!)
  const toSign = [ALGORITHM, claim.stamp, scope, sha256(canonicalRequest(request, claim.signedHeaders, claim.payloadHash))].join('\n')
  if (!sameText(hmac(key, toSign).toString('hex'), claim.signature)) throw signatureMismatch()
  return payloadOf(claim.payloadHash, () => new ChunkChain(key, claim.stamp, scope, claim.signature))
}

/** Every header that changes what the request does must be covered by the signature. */
function requireSigned(request: S3Request, signedHeaders: string[]): void {
  const sorted = [...signedHeaders].sort(compare)
  if (sorted.some((name, index) => name !== signedHeaders[index] || name !== name.toLowerCase())) throw signatureMismatch()
  if (!signedHeaders.includes('host')) throw accessDenied('The host header must be signed.')
  if (signedHeaders.some(name => request.headers[name] === undefined)) throw signatureMismatch()
  const loose = Object.keys(request.headers).find(name => name.startsWith('x-amz-') && !signedHeaders.includes(name))
  if (loose) throw accessDenied(`There were headers present in the request which were not signed: ${loose}`)
}

function payloadOf(hash: string, chain: () => ChunkChain): Payload {
  if (hash === 'UNSIGNED-PAYLOAD') return { kind: 'unsigned' }
  if (/^[0-9a-f]{64}$/.test(hash)) return { kind: 'sha256', hex: hash }
  if (hash === 'STREAMING-AWS4-HMAC-SHA256-PAYLOAD') return { kind: 'chunked', chain: chain(), trailer: false }
  if (hash === 'STREAMING-AWS4-HMAC-SHA256-PAYLOAD-TRAILER') return { kind: 'chunked', chain: chain(), trailer: true }
  if (hash === 'STREAMING-UNSIGNED-PAYLOAD-TRAILER') return { kind: 'chunked', chain: null, trailer: true }
  throw invalidRequest('x-amz-content-sha256 must be UNSIGNED-PAYLOAD, a STREAMING- value or a SHA-256 in hex.')
}

/** Each chunk's signature covers the one before it, beginning with the signature of the headers. */
export class ChunkChain {
  constructor(private readonly key: Buffer, private readonly stamp: string, private readonly scope: string, private previous: string) {}

  checkChunk(sha256Hex: string, signature: string): void {
    this.check(`${ALGORITHM}-PAYLOAD`, [EMPTY_SHA256, sha256Hex], signature)
  }

  /** `lines` are the trailing headers as `name:value\n` in the order sent. */
  checkTrailer(lines: string, signature: string): void {
    this.check(`${ALGORITHM}-TRAILER`, [sha256(lines)], signature)
  }

  private check(algorithm: string, hashes: string[], signature: string): void {
    const expected = hmac(this.key, [algorithm, this.stamp, this.scope, this.previous, ...hashes].join('\n')).toString('hex')
    if (!sameText(expected, signature)) throw signatureMismatch()
    this.previous = signature
  }
}
