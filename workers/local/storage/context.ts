import type { IncomingMessage, ServerResponse } from 'node:http'
import type { S3Request } from './request'
import type { Payload } from './signature'
import type { Store } from './store'

export interface StorageOptions {
  region: string
  /** How much of `bytes=N-` a browser's media element is given at a time; 0 gives it all. */
  mediaRangeCapBytes: number
  /** How long a client may stay silent while it sends a body. */
  idleTimeoutMs: number
}

/** One authenticated request on its way through an operation. */
export interface Exchange {
  request: S3Request
  message: IncomingMessage
  response: ServerResponse
  payload: Payload
  /** The client waits for `100 Continue` before it sends the body. */
  awaitsContinue: boolean
  store: Store
  options: StorageOptions
}

export type Operation = (exchange: Exchange) => Promise<void>

export function sendXml(response: ServerResponse, xml: string, status = 200): void {
  const body = Buffer.from(xml)
  response.writeHead(status, { 'content-type': 'application/xml', 'content-length': body.length })
  response.end(body)
}

export function sendEmpty(response: ServerResponse, status: number, headers: Record<string, string> = {}): void {
  response.writeHead(status, status === 204 ? headers : { 'content-length': 0, ...headers })
  response.end()
}
