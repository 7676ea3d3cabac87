import type { CaptionReading } from '#shared/types/captions'

export type CaptionEncoding = CaptionReading['encoding']

export interface DecodedText {
  text: string
  encoding: CaptionEncoding
  /** Set when letters may have been lost or guessed: a sentence for people. */
  warning?: string
}

/**
 * Turns the bytes of a caption file into text.
 *
 * A byte order mark decides first and is removed once, as the Encoding Standard's "UTF-8 decode" does
 * (a second one stays in the text). Without one, UTF-16 is known by the signature or the arrow between
 * two times spelt in two-byte characters, because every caption file holds one or the other. Bytes that
 * are not valid UTF-8 are Windows-1252, unless most of the letters beyond ASCII are valid UTF-8: then
 * the file is damaged UTF-8, and the damaged bytes become U+FFFD.
 */
export function decodeCaptionBytes(bytes: Uint8Array): DecodedText {
  if (startsWith(bytes, [0xEF, 0xBB, 0xBF])) return decodeEightBit(bytes.subarray(3))
  if (startsWith(bytes, [0xFF, 0xFE])) return decodeUtf16(bytes.subarray(2), 'utf-16le')
  if (startsWith(bytes, [0xFE, 0xFF])) return decodeUtf16(bytes.subarray(2), 'utf-16be')
  const wide = findUtf16(bytes)
  return wide ? decodeUtf16(bytes, wide) : decodeEightBit(bytes)
}

/** True for bytes that no text file holds: pictures, archives, video. */
export function looksBinary(text: string): boolean {
  const sample = text.slice(0, 4096)
  // Only controls that no text file uses; NUL is counted too, as WebVTT tolerates a few of them.
  // eslint-disable-next-line no-control-regex
  const odd = sample.match(/[\x00-\x08\x0E-\x1A\x1C-\x1F\uFFFD]/g)?.length ?? 0
  return odd > sample.length / 20
}

function startsWith(bytes: Uint8Array, prefix: number[]): boolean {
  return prefix.every((byte, i) => bytes[i] === byte)
}

const WIDE_MARKS = ['WEBVTT', '-->']

function findUtf16(bytes: Uint8Array): 'utf-16le' | 'utf-16be' | undefined {
  if (startsWith(bytes, [...'WEBVTT'].map(c => c.charCodeAt(0)))) return undefined
  const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  for (const mark of WIDE_MARKS) {
    const little = Buffer.from(mark, 'utf16le')
    const big = Buffer.from(little).swap16()
    if (foundAligned(buffer, little, mark)) return 'utf-16le'
    if (foundAligned(buffer, big, mark)) return 'utf-16be'
  }
  return undefined
}

function foundAligned(buffer: Buffer, pattern: Buffer, mark: string): boolean {
  // The signature counts only at the start; an arrow anywhere, on an even byte.
  const at = buffer.indexOf(pattern)
  return mark === 'WEBVTT' ? at === 0 : at >= 0 && at % 2 === 0
}

function decodeUtf16(bytes: Uint8Array, encoding: 'utf-16le' | 'utf-16be'): DecodedText {
  const text = new TextDecoder(encoding, { ignoreBOM: true }).decode(bytes)
  return text.includes('\uFFFD')
    ? { text, encoding, warning: 'Some letters in the file are damaged and show as \uFFFD. Everything else was read.' }
    : { text, encoding }
}

function decodeEightBit(bytes: Uint8Array): DecodedText {
  try {
    return { text: new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes), encoding: 'utf-8' }
  }
  catch {
    const { valid, invalid } = countMultibyte(bytes)
    if (valid > invalid) {
      return {
        text: new TextDecoder('utf-8', { ignoreBOM: true }).decode(bytes),
        encoding: 'utf-8',
        warning: 'Some letters in the file are damaged and show as \uFFFD. Everything else was read.',
      }
    }
    return {
      text: decodeWindows1252(bytes),
      encoding: 'windows-1252',
      warning: 'The file is not UTF-8, so it was read as Windows-1252. If letters look wrong, save it as UTF-8 and add it again.',
    }
  }
}

/** 0x80 to 0x9F in Windows-1252; everything else is as in Latin-1 (https://encoding.spec.whatwg.org/index-windows-1252.txt). */
const WINDOWS_1252_HIGH = '€\u0081‚ƒ„…†‡ˆ‰Š‹Œ\u008DŽ\u008F\u0090‘’“”•–—˜™š›œ\u009DžŸ'

function decodeWindows1252(bytes: Uint8Array): string {
  // Node 20's own decoder of that name decodes Latin-1 and loses quotes and dashes.
  return Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('latin1')
    .replace(/[\u0080-\u009F]/g, control => WINDOWS_1252_HIGH[control.charCodeAt(0) - 0x80]!)
}

/** Counts well-formed multi-byte UTF-8 sequences against bytes that fit none (overlong forms are not told apart: this only weighs). */
function countMultibyte(bytes: Uint8Array): { valid: number, invalid: number } {
  let valid = 0
  let invalid = 0
  for (let i = 0; i < bytes.length;) {
    const lead = bytes[i]!
    const length = lead < 0x80 ? 1 : lead >= 0xC2 && lead < 0xE0 ? 2 : lead >= 0xE0 && lead < 0xF0 ? 3 : lead >= 0xF0 && lead < 0xF5 ? 4 : 0
    let whole = length > 0
    for (let k = 1; k < length; k++) whole &&= (bytes[i + k]! & 0xC0) === 0x80
    if (!whole) invalid++
    else if (length > 1) valid++
    i += whole ? length : 1
  }
  return { valid, invalid }
}
