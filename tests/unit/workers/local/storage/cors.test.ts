import { describe, expect, it } from 'vitest'
import { corsDocument, matchRule, parseCors, siteRule } from '../../../../../workers/local/storage/cors'
import { parseXml } from '../../../../../workers/local/storage/xml'

const rules = [siteRule(['http://localhost:3000', 'https://*.example.org'])]

describe('matchRule', () => {
  it.each([
    ['http://localhost:3000', 'PUT', ['content-type'], true],
    ['http://localhost:3000', 'DELETE', [], false],
    ['http://localhost:3001', 'GET', [], false],
    ['http://localhost:3000.evil.example', 'GET', [], false],
    ['https://a.example.org', 'GET', ['range'], true],
    ['https://.example.org', 'GET', [], true],
    ['https://example.org', 'GET', [], false],
    ['null', 'GET', [], false],
  ])('%s %s %o: %s', (origin, method, headers, allowed) => {
    expect(matchRule(rules, origin, method, headers) !== null).toBe(allowed)
  })

  it('wants every header allowed', () => {
    const strict = [{ ...rules[0]!, allowedHeaders: ['Content-*', 'range'] }]
    expect(matchRule(strict, 'http://localhost:3000', 'PUT', ['content-type', 'range'])).not.toBeNull()
    expect(matchRule(strict, 'http://localhost:3000', 'PUT', ['x-other'])).toBeNull()
  })
})

describe('the CORS document', () => {
  it('is read back as it was written', () => {
    expect(parseCors(parseXml(corsDocument(rules)))).toEqual(rules)
  })

  it.each([
    ['no rule', '<CORSConfiguration/>'],
    ['a rule without origin', '<CORSConfiguration><CORSRule><AllowedMethod>GET</AllowedMethod></CORSRule></CORSConfiguration>'],
    ['an unknown method', '<CORSConfiguration><CORSRule><AllowedOrigin>*</AllowedOrigin><AllowedMethod>PATCH</AllowedMethod></CORSRule></CORSConfiguration>'],
    ['two wildcards', '<CORSConfiguration><CORSRule><AllowedOrigin>*.*</AllowedOrigin><AllowedMethod>GET</AllowedMethod></CORSRule></CORSConfiguration>'],
    ['a header that splits the answer', '<CORSConfiguration><CORSRule><AllowedOrigin>*</AllowedOrigin><AllowedMethod>GET</AllowedMethod><ExposeHeader>a&#13;&#10;b</ExposeHeader></CORSRule></CORSConfiguration>'],
  ])('refuses %s', (_, xml) => {
    expect(() => parseCors(parseXml(xml))).toThrow(expect.objectContaining({ status: 400 }))
  })
})
