/** Byte positions are inclusive at both ends, as in RFC 9110 section 14. */
export type ByteRange
  = | { kind: 'whole' }
    | { kind: 'part', start: number, end: number, openEnded: boolean }
    | { kind: 'unsatisfiable' }

/**
 * Reads one Range header against an object of `sizeBytes`. What cannot be read, and lists of several
 * ranges, are ignored (the whole object is sent), as RFC 9110 allows and S3 does.
 */
export function parseRange(header: string | undefined, sizeBytes: number): ByteRange {
  const match = /^bytes=(\d*)-(\d*)$/.exec(header?.trim() ?? '')
  if (!match || (!match[1] && !match[2])) return { kind: 'whole' }
  if (!match[1]) {
    const length = Number(match[2])
    if (length === 0 || sizeBytes === 0) return { kind: 'unsatisfiable' }
    return { kind: 'part', start: Math.max(0, sizeBytes - length), end: sizeBytes - 1, openEnded: false }
  }
  const start = Number(match[1])
  const last = match[2] ? Number(match[2]) : Number.POSITIVE_INFINITY
  if (last < start) return { kind: 'whole' }
  if (start >= sizeBytes) return { kind: 'unsatisfiable' }
  return { kind: 'part', start, end: Math.min(last, sizeBytes - 1), openEnded: !match[2] }
}

/**
 * Whether a request comes from an audio or video element of a browser. Browsers say so in
 * Sec-Fetch-Dest where the address is trustworthy (https or loopback); elsewhere Chromium's media
 * loader is known by refusing every content coding. SDKs, ffmpeg and fetch() send neither.
 */
export function isMediaElement(headers: Record<string, string | undefined>): boolean {
  const destination = headers['sec-fetch-dest']
  if (destination !== undefined) return destination === 'video' || destination === 'audio'
  return headers['accept-encoding'] === 'identity;q=1, *;q=0' && (headers['user-agent'] ?? '').startsWith('Mozilla/')
}

/** Whether answers to this request are portioned. */
export function isPortioned(headers: Record<string, string | undefined>, contentType: string, capBytes: number): boolean {
  return capBytes > 0 && /^(?:video|audio)\//.test(contentType) && isMediaElement(headers)
}

/**
 * Shortens the answer to `bytes=N-` from a media element: it asks for everything to the end, then
 * throws most of it away at the next seek. A 206 may be shorter than asked, and the element asks again.
 *
 * Portions must not be cached by the browser: Chromium's cache would turn the element's next
 * `bytes=N-` into `bytes=N-LAST`, and it takes an answer shorter than that for an error.
 */
export function capForMedia(range: ByteRange, capBytes: number): ByteRange {
  if (range.kind !== 'part' || !range.openEnded) return range
  return { ...range, end: Math.min(range.end, range.start + capBytes - 1) }
}
