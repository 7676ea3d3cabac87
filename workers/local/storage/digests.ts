import { createHash, type Hash } from 'node:crypto'
import { crc32 } from 'node:zlib'
import { invalidRequest, notImplemented, S3Error } from './errors'

/** Checksums that are both verified and kept. Others are refused rather than waved through. */
const SUPPORTED = ['crc32', 'sha1', 'sha256'] as const
type ChecksumName = typeof SUPPORTED[number]
const LENGTHS: Record<ChecksumName, number> = { crc32: 4, sha1: 20, sha256: 32 }
const NOT_ALGORITHMS = new Set(['x-amz-checksum-mode', 'x-amz-checksum-algorithm', 'x-amz-checksum-type'])

const badDigest = (what: string) => new S3Error(400, 'BadDigest', `The ${what} you specified did not match what we received.`)

function checksumName(header: string): ChecksumName {
  const name = header.slice('x-amz-checksum-'.length)
  const known = SUPPORTED.find(candidate => candidate === name)
  if (!known) throw notImplemented(`the checksum ${name}`)
  return known
}

export interface ObjectDigests {
  md5: Buffer
  /** Base64 values by algorithm, as given by the client and verified. */
  checksums: Record<string, string>
}

/** Everything that is computed over a body while it streams by, and what it must come to. */
export class Digests {
  private readonly md5 = createHash('md5')
  private readonly hashes = new Map<'sha1' | 'sha256', Hash>()
  private crc = 0
  private readonly expected = new Map<ChecksumName, string>()
  private readonly contentMd5: string | undefined
  private awaited: ChecksumName | null = null
  private wantsCrc = false

  constructor(headers: Record<string, string>, private readonly payloadSha256: string | null = null) {
    this.contentMd5 = headers['content-md5']
    if (this.contentMd5 !== undefined && Buffer.from(this.contentMd5, 'base64').length !== 16) {
      throw new S3Error(400, 'InvalidDigest', 'The Content-MD5 you specified is not valid.')
    }
    for (const [header, value] of Object.entries(headers)) {
      if (header.startsWith('x-amz-checksum-') && !NOT_ALGORITHMS.has(header)) this.expect(checksumName(header), value)
    }
    const trailer = headers['x-amz-trailer']
    if (trailer?.startsWith('x-amz-checksum-')) {
      this.awaited = checksumName(trailer)
      this.compute(this.awaited)
    }
    else if (trailer) {
      throw notImplemented(`the trailer ${trailer}`)
    }
    if (payloadSha256) this.compute('sha256')
  }

  private expect(name: ChecksumName, value: string): void {
    if (Buffer.from(value, 'base64').length !== LENGTHS[name]) throw invalidRequest(`Value for x-amz-checksum-${name} header is invalid.`)
    this.expected.set(name, value)
    this.compute(name)
  }

  private compute(name: ChecksumName): void {
    if (name === 'crc32') this.wantsCrc = true
    else if (!this.hashes.has(name)) this.hashes.set(name, createHash(name))
  }

  update(bytes: Buffer): void {
    this.md5.update(bytes)
    if (this.wantsCrc) this.crc = crc32(bytes, this.crc)
    for (const hash of this.hashes.values()) hash.update(bytes)
  }

  takeTrailers(trailers: Map<string, string>): void {
    const value = this.awaited && trailers.get(`x-amz-checksum-${this.awaited}`)
    if (this.awaited && !value) throw invalidRequest('The announced trailing checksum is missing.')
    if (this.awaited && value) this.expect(this.awaited, value)
  }

  /** Throws BadDigest when the body is not what was announced. */
  finish(): ObjectDigests {
    const md5 = this.md5.digest()
    if (this.contentMd5 !== undefined && this.contentMd5 !== md5.toString('base64')) throw badDigest('Content-MD5')
    const actual: Partial<Record<ChecksumName, Buffer>> = {}
    if (this.wantsCrc) {
      actual.crc32 = Buffer.alloc(4)
      actual.crc32.writeUInt32BE(this.crc)
    }
    for (const [name, hash] of this.hashes) actual[name] = hash.digest()
    if (this.payloadSha256 && actual.sha256?.toString('hex') !== this.payloadSha256) {
      throw new S3Error(400, 'XAmzContentSHA256Mismatch', 'The provided x-amz-content-sha256 header does not match what was computed.')
    }
    const checksums: Record<string, string> = {}
    for (const [name, value] of this.expected) {
      if (actual[name]?.toString('base64') !== value) throw badDigest(name.toUpperCase())
      checksums[name] = value
    }
    return { md5, checksums }
  }
}
