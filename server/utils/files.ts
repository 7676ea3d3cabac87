import type { H3Event } from 'h3'
import { z } from 'zod'
import { DomainError, notFound } from '#shared/utils/errors'

/**
 * Reads a body of at most `most` bytes and refuses a longer one as soon as it shows, without keeping it.
 * @throws DomainError 'too-large'
 */
export async function readBytes(event: H3Event, most: number, tooLarge: (megabytes: number) => string): Promise<Buffer> {
  const refused = () => new DomainError('too-large', tooLarge(most / 1024 / 1024))
  if (Number(getHeader(event, 'content-length') ?? 0) > most) throw refused()
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of event.node.req as AsyncIterable<Buffer>) {
    size += chunk.length
    if (size > most) throw refused()
    chunks.push(chunk)
  }
  return Buffer.concat(chunks)
}

/** A download's name (RFC 6266), plain for old clients and as it is beside it. */
export function attachment(name: string): string {
  const plain = name.normalize('NFKD').replace(/[^\x20-\x7E]/g, '').replace(/["\\%]/g, '_')
  const full = encodeURIComponent(name).replace(/[!'()*]/g, c => `%${c.charCodeAt(0).toString(16).toUpperCase()}`)
  return `attachment; filename="${plain}"; filename*=UTF-8''${full}`
}

/** Browsers may keep where a picture or clip lies for a few minutes, so that each is asked about once. */
const KEEP_ADDRESS_SECONDS = 300

/** Sends the browser to the storage: video and pictures never pass through the site. */
export function sendToStorage(event: H3Event, address: string) {
  setResponseHeader(event, 'Cache-Control', `private, max-age=${KEEP_ADDRESS_SECONDS}`)
  return sendRedirect(event, address, 302)
}

/** The id in `<id>.vtt`. */
export function trackOf(file: string): string {
  const id = file.replace(/\.vtt$/, '')
  if (id === file || !z.uuid().safeParse(id).success) throw notFound('Those captions')
  return id.toLowerCase()
}
