import type { ServerResponse } from 'node:http'
import { malformedXml, S3Error } from './errors'
import type { CorsRule } from './records'
import type { S3Request } from './request'
import { branch, childrenNamed, document, leaf, type XmlElement } from './xml'

const METHODS = ['GET', 'PUT', 'HEAD', 'POST', 'DELETE']
const MAX_RULES = 100

/** The rule that browsers of the site need: read by range, put parts, see their ETags. */
export function siteRule(origins: string[]): CorsRule {
  return {
    allowedOrigins: origins,
    allowedMethods: ['GET', 'HEAD', 'PUT'],
    allowedHeaders: ['*'],
    exposeHeaders: ['ETag', 'Content-Range', 'Content-Length', 'Accept-Ranges'],
    maxAgeSeconds: 3600,
  }
}

export function parseCors(root: XmlElement): CorsRule[] {
  const rules = childrenNamed(root, 'CORSRule')
  if (root.name !== 'CORSConfiguration' || rules.length === 0 || rules.length > MAX_RULES) throw malformedXml()
  return rules.map((rule) => {
    const texts = (name: string) => childrenNamed(rule, name).map(element => element.text.trim())
    const [allowedOrigins, allowedMethods, [maxAge]] = [texts('AllowedOrigin'), texts('AllowedMethod'), texts('MaxAgeSeconds')]
    if (!allowedOrigins.length || !allowedMethods.length) throw malformedXml()
    if (allowedMethods.some(method => !METHODS.includes(method))) throw new S3Error(400, 'InvalidRequest', 'Found unsupported HTTP method in CORS config.')
    if ([...allowedOrigins, ...texts('AllowedHeader')].some(pattern => pattern.split('*').length > 2)) {
      throw new S3Error(400, 'InvalidRequest', 'AllowedOrigin and AllowedHeader can not have more than one wildcard.')
    }
    if (texts('ExposeHeader').some(name => !/^[\w-]+$/.test(name)) || (maxAge && !/^\d{1,9}$/.test(maxAge))) throw malformedXml()
    return { allowedOrigins, allowedMethods, allowedHeaders: texts('AllowedHeader'), exposeHeaders: texts('ExposeHeader'), maxAgeSeconds: maxAge ? Number(maxAge) : null }
  })
}

export function corsDocument(rules: CorsRule[]): string {
  return document('CORSConfiguration', ...rules.map(rule => branch('CORSRule',
    ...rule.allowedOrigins.map(value => leaf('AllowedOrigin', value)),
    ...rule.allowedMethods.map(value => leaf('AllowedMethod', value)),
    ...rule.allowedHeaders.map(value => leaf('AllowedHeader', value)),
    ...rule.exposeHeaders.map(value => leaf('ExposeHeader', value)),
    ...(rule.maxAgeSeconds === null ? [] : [leaf('MaxAgeSeconds', rule.maxAgeSeconds)]),
  )))
}

function fits(pattern: string, value: string): boolean {
  const star = pattern.indexOf('*')
  if (star < 0) return pattern === value
  const [head, tail] = [pattern.slice(0, star), pattern.slice(star + 1)]
  return value.length >= head.length + tail.length && value.startsWith(head) && value.endsWith(tail)
}

/** The first rule that allows the origin, the method and every header asked for. */
export function matchRule(rules: CorsRule[], origin: string, method: string, headers: string[]): CorsRule | null {
  return rules.find(rule =>
    rule.allowedOrigins.some(pattern => fits(pattern, origin))
    && rule.allowedMethods.includes(method)
    && headers.every(name => rule.allowedHeaders.some(pattern => fits(pattern.toLowerCase(), name)))) ?? null
}

function allowOrigin(response: ServerResponse, rule: CorsRule, origin: string): void {
  response.setHeader('access-control-allow-origin', rule.allowedOrigins.includes('*') ? '*' : origin)
  if (rule.exposeHeaders.length) response.setHeader('access-control-expose-headers', rule.exposeHeaders.join(', '))
}

/** Marks the answer to a plain request. Caches must keep answers to different origins apart. */
export function applyCors(response: ServerResponse, request: S3Request, rules: CorsRule[]): void {
  if (rules.length) response.setHeader('vary', 'Origin, Access-Control-Request-Headers, Access-Control-Request-Method')
  const origin = request.headers.origin
  const rule = origin ? matchRule(rules, origin, request.method, []) : null
  if (origin && rule) allowOrigin(response, rule, origin)
}

/** Answers `OPTIONS`, which browsers send without credentials. */
export function answerPreflight(response: ServerResponse, request: S3Request, rules: CorsRule[]): void {
  const { origin, 'access-control-request-method': method, 'access-control-request-headers': wanted } = request.headers
  if (!origin || !method) throw new S3Error(400, 'BadRequest', 'Insufficient information. Origin and Access-Control-Request-Method request headers needed.')
  const headers = (wanted ?? '').split(',').map(name => name.trim().toLowerCase()).filter(Boolean)
  const rule = matchRule(rules, origin, method, headers)
  if (!rule) throw new S3Error(403, 'AccessForbidden', 'CORSResponse: This CORS request is not allowed.')
  allowOrigin(response, rule, origin)
  response.setHeader('access-control-allow-methods', rule.allowedMethods.join(', '))
  if (headers.length) response.setHeader('access-control-allow-headers', headers.join(', '))
  if (rule.maxAgeSeconds !== null) response.setHeader('access-control-max-age', rule.maxAgeSeconds)
  response.writeHead(200, { 'content-length': 0 })
  response.end()
}
