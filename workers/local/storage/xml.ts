import { malformedXml } from './errors'

const DECLARATION = '<?xml version="1.0" encoding="UTF-8"?>\n'
export const S3_NAMESPACE = 'http://s3.amazonaws.com/doc/2006-03-01/'

export function escapeXml(value: string): string {
  return value.replace(/[&<>"'\r\n]/g, character => `&#${character.charCodeAt(0)};`)
}

/** One element holding text. */
export function leaf(name: string, value: string | number | boolean): string {
  return `<${name}>${escapeXml(String(value))}</${name}>`
}

/** One element holding others, already written. */
export function branch(name: string, ...children: string[]): string {
  return `<${name}>${children.join('')}</${name}>`
}

export function document(name: string, ...children: string[]): string {
  return `${DECLARATION}<${name} xmlns="${S3_NAMESPACE}">${children.join('')}</${name}>`
}

/** S3 error documents carry no namespace. */
export function errorDocument(...children: string[]): string {
  return DECLARATION + branch('Error', ...children)
}

export interface XmlElement { name: string, text: string, children: XmlElement[] }

const MAX_DEPTH = 8
const ENTITIES: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: '\'' }
const TOKEN = /<!--[\s\S]*?-->|<\?[\s\S]*?\?>|<(\/?)([A-Za-z_][\w.:-]*)((?:\s+[\w.:-]+\s*=\s*(?:"[^"<]*"|'[^'<]*'))*)\s*(\/?)>|([^<]+)/y

function decodeEntities(text: string): string {
  return text.replace(/&([^;&]{0,12});?/g, (whole, body: string) => {
    if (!whole.endsWith(';')) throw malformedXml()
    const named = ENTITIES[body]
    if (named) return named
    const numeric = /^#(?:x([0-9a-fA-F]{1,6})|([0-9]{1,7}))$/.exec(body)
    const point = numeric ? Number.parseInt(numeric[1] ?? numeric[2]!, numeric[1] ? 16 : 10) : Number.NaN
    if (!(point > 0 && point <= 0x10FFFF)) throw malformedXml()
    return String.fromCodePoint(point)
  })
}

/**
 * Reads the small request documents of S3. Elements and text only: attributes are skipped,
 * document types and CDATA are refused, so no entity can expand and nothing outside is opened.
 */
export function parseXml(source: string): XmlElement {
  const top: XmlElement = { name: '', text: '', children: [] }
  const stack = [top]
  const input = source.replace(/^\uFEFF/, '')
  TOKEN.lastIndex = 0
  while (TOKEN.lastIndex < input.length) {
    const match = TOKEN.exec(input)
    if (!match) throw malformedXml()
    const [, closing, name, , selfClosing, text] = match
    const current = stack[stack.length - 1]!
    if (text !== undefined) {
      current.text += decodeEntities(text)
    }
    else if (name && closing) {
      if (stack.length < 2 || current.name !== name) throw malformedXml()
      stack.pop()
    }
    else if (name) {
      if (stack.length > MAX_DEPTH) throw malformedXml()
      const element: XmlElement = { name, text: '', children: [] }
      current.children.push(element)
      if (!selfClosing) stack.push(element)
    }
  }
  if (stack.length !== 1 || top.children.length !== 1 || top.text.trim()) throw malformedXml()
  return top.children[0]!
}

export function childrenNamed(element: XmlElement, name: string): XmlElement[] {
  return element.children.filter(child => child.name === name)
}

export function textOf(element: XmlElement, name: string): string | undefined {
  return element.children.find(child => child.name === name)?.text
}
