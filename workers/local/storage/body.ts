import { decodeChunked } from './chunked'
import type { Exchange } from './context'
import { Digests, type ObjectDigests } from './digests'
import { incompleteBody, invalidRequest, malformedXml, S3Error } from './errors'
import { parseXml, type XmlElement } from './xml'

/** The largest single PUT that S3 takes. */
export const MAX_PUT_BYTES = 5 * 1024 ** 3
const MAX_XML_BYTES = 4 * 1024 ** 2

export interface Body {
  bytes: AsyncIterable<Buffer>
  sizeBytes: number
  digests: Digests
  /** Call once `bytes` has been read to the end: throws when it was not what was announced. */
  verify(): ObjectDigests
}

function lengthHeader(value: string | undefined): number {
  if (value === undefined || !/^\d{1,15}$/.test(value)) throw new S3Error(411, 'MissingContentLength', 'You must provide the Content-Length HTTP header.')
  return Number(value)
}

/** Prepares to read the body of a request; nothing has been read when this returns. */
export function openBody(exchange: Exchange, maxBytes = MAX_PUT_BYTES): Body {
  const { request, payload } = exchange
  const chunked = payload.kind === 'chunked'
  // The chunks carry their own lengths, so a client may send them without knowing the sum.
  const onTheWire = request.headers['content-length']
  const wireLength = chunked && onTheWire === undefined ? null : lengthHeader(onTheWire)
  const sizeBytes = wireLength === null || chunked ? lengthHeader(request.headers['x-amz-decoded-content-length']) : wireLength
  if (sizeBytes > maxBytes) throw new S3Error(400, 'EntityTooLarge', 'Your proposed upload exceeds the maximum allowed size.')
  if (!chunked && request.headers['x-amz-trailer']) throw invalidRequest('Trailing headers need an aws-chunked body.')
  const digests = new Digests(request.headers, payload.kind === 'sha256' ? payload.hex : null)
  const raw = readMessage(exchange, wireLength)
  const bytes = chunked
    ? decodeChunked(raw, {
        chain: payload.chain,
        trailer: payload.trailer,
        decodedLength: sizeBytes,
        onTrailers: trailers => digests.takeTrailers(trailers),
      })
    : raw
  return { bytes, sizeBytes, digests, verify: () => digests.finish() }
}

async function* readMessage(exchange: Exchange, length: number | null): AsyncGenerator<Buffer> {
  const { message, response } = exchange
  if (exchange.awaitsContinue) {
    exchange.awaitsContinue = false
    response.writeContinue()
  }
  let received = 0
  const silence = () => message.destroy(new Error('The client stopped sending.'))
  message.setTimeout(exchange.options.idleTimeoutMs, silence)
  try {
    // Left to itself the iterator destroys the message, and with it the way to answer.
    for await (const bytes of message.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
      received += bytes.length
      yield bytes
    }
  }
  catch {
    throw incompleteBody()
  }
  finally {
    message.setTimeout(0)
    message.off('timeout', silence)
  }
  if (length !== null && received !== length) throw incompleteBody()
}

/** Reads a small XML document. */
export async function readXml(exchange: Exchange): Promise<XmlElement> {
  const body = openBody(exchange, MAX_XML_BYTES)
  const pieces: Buffer[] = []
  for await (const bytes of body.bytes) {
    body.digests.update(bytes)
    pieces.push(bytes)
  }
  body.verify()
  try {
    return parseXml(new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(pieces)))
  }
  catch {
    throw malformedXml()
  }
}

/** Reads what is left of a refused request, so that the client gets to see the answer. */
export async function drain(exchange: Pick<Exchange, 'message'>, maxBytes: number, maxMs: number): Promise<boolean> {
  const { message } = exchange
  if (message.complete || message.destroyed) return message.complete
  const deadline = Date.now() + maxMs
  const timer = setTimeout(() => message.destroy(), maxMs)
  let left = maxBytes
  try {
    for await (const bytes of message.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
      left -= bytes.length
      if (left < 0 || Date.now() > deadline) return false
    }
    return true
  }
  catch {
    return false
  }
  finally {
    clearTimeout(timer)
  }
}
