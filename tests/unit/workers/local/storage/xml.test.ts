import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { branch, escapeXml, leaf, parseXml } from '../../../../../workers/local/storage/xml'

describe('parseXml', () => {
  it('reads elements, text, entities and comments', () => {
    const root = parseXml('<?xml version="1.0"?>\n<!-- hello --><Delete xmlns="urn:x" a=\'1\'><Object><Key>a &amp; b&#x20;&#233;</Key></Object><Quiet/></Delete>\n')
    expect(root.name).toBe('Delete')
    expect(root.children.map(child => child.name)).toEqual(['Object', 'Quiet'])
    expect(root.children[0]!.children[0]!.text).toBe('a & b é')
  })

  it('gives back any text that was escaped', () => {
    fc.assert(fc.property(fc.string({ unit: 'grapheme' }), (text) => {
      expect(parseXml(branch('A', leaf('Key', text))).children[0]!.text).toBe(text)
    }))
  })

  it.each([
    ['nothing', ''],
    ['text alone', 'hello'],
    ['an open element', '<a><b></b>'],
    ['crossed elements', '<a><b></a></b>'],
    ['two roots', '<a/><b/>'],
    ['a document type with entities', '<!DOCTYPE a [<!ENTITY x "y">]><a>&x;</a>'],
    ['an outside entity', '<!DOCTYPE a [<!ENTITY x SYSTEM "file:///etc/passwd">]><a>&x;</a>'],
    ['an unknown entity', '<a>&x;</a>'],
    ['a bare ampersand', '<a>a & b</a>'],
    ['a character that does not exist', '<a>&#x110000;</a>'],
    ['CDATA', '<a><![CDATA[x]]></a>'],
    ['very deep nesting', '<a>'.repeat(10_000) + '</a>'.repeat(10_000)],
  ])('refuses %s', (_, source) => {
    expect(() => parseXml(source)).toThrow(/not well-formed/)
  })

  it('escapes what would end an element or an attribute', () => {
    expect(escapeXml('<a href="x">&\'\r\n')).toBe('&#60;a href=&#34;x&#34;&#62;&#38;&#39;&#13;&#10;')
  })
})
