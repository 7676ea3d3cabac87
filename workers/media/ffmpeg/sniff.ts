import { clipFault } from './faults'

/**
 * Looks at the first bytes of an upload and refuses what must not reach ffmpeg or cannot be a clip.
 * ffmpeg's own format list refuses them too; this is where they get a message that fits.
 * @throws ClipFault
 */
export function refuseByHead(head: Buffer): void {
  if (head.length === 0) throw clipFault('empty-file')
  if (head.every(byte => byte === 0)) throw clipFault('not-a-video', 'it begins with zeros only, as a copy that was broken off does')
  const text = asText(head)
  if (text === null) return
  const list = LISTS.find(([pattern]) => pattern.test(text))
  if (list) throw clipFault('forbidden-format', list[1])
  throw clipFault('not-a-video', 'it holds plain text')
}

const LISTS: [RegExp, string][] = [
  [/^\s*#EXTM3U/i, 'a playlist (M3U8)'],
  [/^\s*ffconcat\s+version/i, 'a list for joining files (ffconcat)'],
  [/^\s*file\s+\S+/i, 'a list for joining files'],
  [/^\s*(<\?xml[^>]*>\s*)?(<!--[\s\S]*?-->\s*)*<MPD[\s>]/i, 'a streaming manifest (DASH)'],
  [/^\s*(<\?xml[^>]*>\s*)?<(smil|asx|playlist|SmoothStreamingMedia)[\s>]/i, 'a playlist'],
  [/^\s*\[(playlist|reference)\]/i, 'a playlist'],
  [/^v=0\s*[\r\n]+o=/, 'a streaming description (SDP)'],
  [/^\s*(file|https?|rtsp|rtmp|ftp|concat|subfile|data):\S+/i, 'a list of addresses'],
]

/** The head as text when nothing in it is binary, else null. UTF-16 with its mark counts as text. */
function asText(head: Buffer): string | null {
  if (head[0] === 0xFF && head[1] === 0xFE) return head.toString('utf16le', 2)
  if (head[0] === 0xFE && head[1] === 0xFF) return Buffer.from(head.subarray(2, head.length & ~1)).swap16().toString('utf16le')
  const binary = head.some(byte => byte < 9 || (byte > 13 && byte < 32 && byte !== 27) || byte === 127)
  return binary ? null : head.toString('utf8').replace(/^\uFEFF/, '')
}
