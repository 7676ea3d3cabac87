import { decodeHTML } from 'entities/decode'

/** The tags of WebVTT cue text; any other is ignored by players, and what it encloses stays. */
const CUE_TAGS = new Set(['', 'c', 'i', 'b', 'u', 'ruby', 'rt', 'v', 'lang'])

const CHARACTER_REFERENCE = /&(?:#(?:[xX][0-9a-fA-F]+|[0-9]+);?|[A-Za-z][A-Za-z0-9]*;?)/g

/** No reference is longer than this and still worth remembering (the longest name has 32 characters). */
const REMEMBERED_LENGTH = 40
const REMEMBERED_COUNT = 500
const remembered = new Map<string, string>()

export interface PlainText {
  text: string
  /** The first tag that is no caption markup, such as `<script>`, with its brackets. */
  foreignTag?: string
}

/**
 * What a player shows for WebVTT cue text: the text content of the tree that the "WebVTT cue text
 * parsing rules" build (https://www.w3.org/TR/webvtt1/#cue-text-parsing-rules).
 *
 * Every state that the tokenizer enters after `<` ends at the next `>` or at the end of the text and
 * puts nothing into text nodes, so the text is what lies outside those stretches. References are
 * decoded within each stretch alone: `&am<b>p;` is not an ampersand.
 */
export function plainCueText(raw: string): PlainText {
  let open = raw.indexOf('<')
  if (open < 0) return { text: decodeReferences(raw) }
  let text = ''
  let position = 0
  let foreignTag: string | undefined
  while (open >= 0) {
    text += decodeReferences(raw.slice(position, open))
    const close = raw.indexOf('>', open)
    const end = close < 0 ? raw.length : close
    foreignTag ??= foreignTagIn(raw, open, end)
    position = end + 1
    open = raw.indexOf('<', position)
  }
  text += decodeReferences(raw.slice(position))
  return foreignTag === undefined ? { text } : { text, foreignTag }
}

function foreignTagIn(raw: string, open: number, end: number): string | undefined {
  const inside = raw.slice(open + 1, Math.min(end, open + 60))
  if (/^\d/.test(inside)) return undefined // a timestamp tag
  const name = /^\/?([^\t\n\f .]*)/.exec(inside)?.[1] ?? ''
  return CUE_TAGS.has(name) ? undefined : `<${inside}>`
}

/** Decodes HTML character references in text (not in attributes), named, decimal and hexadecimal. */
export function decodeReferences(text: string): string {
  if (!text.includes('&')) return text
  return text.replace(CHARACTER_REFERENCE, (reference) => {
    if (reference.length > REMEMBERED_LENGTH) return decodeHTML(reference)
    let decoded = remembered.get(reference)
    if (decoded === undefined) {
      decoded = decodeHTML(reference)
      if (remembered.size >= REMEMBERED_COUNT) remembered.clear()
      remembered.set(reference, decoded)
    }
    return decoded
  })
}
