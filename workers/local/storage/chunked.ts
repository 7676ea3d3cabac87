import { createHash } from 'node:crypto'
import { incompleteBody, invalidRequest } from './errors'
import type { ChunkChain } from './signature'

/**
 * The `aws-chunked` body form: `SIZE[;chunk-signature=…]\r\n DATA \r\n … 0 … \r\n [trailers] \r\n`.
 * Source: Amazon S3 API Reference, "Signature calculations: transferring payload in multiple chunks".
 */
const MAX_LINE = 8192
const MAX_TRAILERS = 16

/** Takes a stream of buffers apart by lines and counts without ever joining more than one line. */
class ByteReader {
  private rest: Buffer = Buffer.alloc(0)
  private readonly source: AsyncIterator<Buffer>

  constructor(source: AsyncIterable<Buffer>) {
    this.source = source[Symbol.asyncIterator]()
  }

  private async fill(): Promise<boolean> {
    while (this.rest.length === 0) {
      const next = await this.source.next()
      if (next.done) return false
      this.rest = next.value
    }
    return true
  }

  async some(max: number): Promise<Buffer> {
    if (!await this.fill()) throw incompleteBody()
    const piece = this.rest.subarray(0, max)
    this.rest = this.rest.subarray(piece.length)
    return piece
  }

  async line(): Promise<string> {
    let text = ''
    for (;;) {
      if (!await this.fill()) throw incompleteBody()
      const at = this.rest.indexOf(0x0A)
      const piece = at < 0 ? this.rest : this.rest.subarray(0, at + 1)
      this.rest = this.rest.subarray(piece.length)
      text += piece.toString('latin1')
      if (text.length > MAX_LINE) throw invalidRequest('A chunk header is too long.')
      if (at >= 0) break
    }
    if (!text.endsWith('\r\n')) throw invalidRequest('A chunk header must end with CRLF.')
    return text.slice(0, -2)
  }

  /** Lets go of the source, so that whoever reads on finds it as it was left. */
  async release(): Promise<void> {
    await this.source.return?.()
  }

  async expectEnd(): Promise<void> {
    if (await this.fill()) throw invalidRequest('There are bytes after the last chunk.')
  }
}

function parseHeader(line: string): { size: number, signature: string } {
  const match = /^([0-9a-fA-F]{1,10})(?:;chunk-signature=([0-9a-f]{64}))?$/.exec(line)
  if (!match) throw invalidRequest('A chunk header could not be read.')
  return { size: Number.parseInt(match[1]!, 16), signature: match[2] ?? '' }
}

export interface ChunkedOptions {
  /** Present when every chunk is signed. */
  chain: ChunkChain | null
  trailer: boolean
  /** From `x-amz-decoded-content-length`. */
  decodedLength: number
  onTrailers?: (trailers: Map<string, string>) => void
}

/**
 * Yields the data of the chunks. A signed chunk's bytes are yielded before its signature is known,
 * so the caller must keep nothing if this throws.
 */
export async function* decodeChunked(source: AsyncIterable<Buffer>, options: ChunkedOptions): AsyncGenerator<Buffer> {
  const reader = new ByteReader(source)
  try {
    yield* decode(reader, options)
  }
  finally {
    await reader.release()
  }
}

async function* decode(reader: ByteReader, options: ChunkedOptions): AsyncGenerator<Buffer> {
  let total = 0
  for (;;) {
    const { size, signature } = parseHeader(await reader.line())
    total += size
    if (total > options.decodedLength) throw incompleteBody()
    const hash = options.chain && createHash('sha256')
    for (let left = size; left > 0;) {
      const piece = await reader.some(left)
      left -= piece.length
      hash?.update(piece)
      yield piece
    }
    if (options.chain && hash) options.chain.checkChunk(hash.digest('hex'), signature)
    if (size === 0) break
    if (await reader.line() !== '') throw invalidRequest('A chunk is longer than its header says.')
  }
  if (total !== options.decodedLength) throw incompleteBody()
  const trailers = await readTrailers(reader, options)
  await reader.expectEnd()
  options.onTrailers?.(trailers)
}

async function readTrailers(reader: ByteReader, options: ChunkedOptions): Promise<Map<string, string>> {
  const trailers = new Map<string, string>()
  let lines = ''
  let signature = ''
  for (let line = await reader.line(); line !== ''; line = await reader.line()) {
    const at = line.indexOf(':')
    if (!options.trailer || at < 1 || trailers.size >= MAX_TRAILERS) throw invalidRequest('The trailing headers could not be read.')
    const [name, value] = [line.slice(0, at).trim().toLowerCase(), line.slice(at + 1).trim()]
    if (name === 'x-amz-trailer-signature') {
      signature = value
      continue
    }
    trailers.set(name, value)
    lines += `${name}:${value}\n`
  }
  if (options.chain && options.trailer) options.chain.checkTrailer(lines, signature)
  return trailers
}
