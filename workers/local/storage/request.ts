import type { IncomingMessage } from 'node:http'
import { invalidRequest, S3Error } from './errors'

/** A request as it came over the wire, decoded once. `URL` is not used: it would fold `..` in keys. */
export interface S3Request {
  method: string
  /** Decoded path, still with its leading slash. */
  path: string
  bucket: string
  key: string
  /** Decoded pairs in the order sent. */
  query: [string, string][]
  headers: Record<string, string>
  param(name: string): string | undefined
}

function decode(text: string): string {
  try {
    return decodeURIComponent(text)
  }
  catch {
    throw new S3Error(400, 'InvalidURI', 'Could not parse the specified URI.')
  }
}

export function parseQuery(raw: string): [string, string][] {
  return raw.split('&').filter(Boolean).map((pair) => {
    const at = pair.indexOf('=')
    const [name, value] = at < 0 ? [pair, ''] : [pair.slice(0, at), pair.slice(at + 1)]
    return [decode(name.replaceAll('+', ' ')), decode(value.replaceAll('+', ' '))]
  })
}

export function parseRequest(message: IncomingMessage): S3Request {
  const target = message.url ?? '/'
  if (!target.startsWith('/')) throw invalidRequest('The request target must be a path.')
  const mark = target.indexOf('?')
  const path = decode(mark < 0 ? target : target.slice(0, mark))
  const query = parseQuery(mark < 0 ? '' : target.slice(mark + 1))
  const slash = path.indexOf('/', 1)
  const headers: Record<string, string> = {}
  for (const [name, values] of Object.entries(message.headersDistinct)) {
    if (values) headers[name] = values.join(',')
  }
  return {
    method: message.method ?? 'GET',
    path,
    bucket: slash < 0 ? path.slice(1) : path.slice(1, slash),
    key: slash < 0 ? '' : path.slice(slash + 1),
    query,
    headers,
    param: name => query.find(([key]) => key === name)?.[1],
  }
}

/** A whole number from a query parameter, or the fallback when it is absent. */
export function wholeParam(request: S3Request, name: string, fallback: number, min: number, max: number): number {
  const raw = request.param(name)
  if (raw === undefined || raw === '') return fallback
  const value = /^\d{1,10}$/.test(raw) ? Number(raw) : Number.NaN
  if (!(value >= min)) throw new S3Error(400, 'InvalidArgument', `Argument ${name} must be an integer between ${min} and ${max}.`)
  return Math.min(value, max)
}
