import { randomBytes } from 'node:crypto'
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import type { AddressInfo } from 'node:net'
import { drain } from './body'
import type { StorageOptions } from './context'
import { answerPreflight, applyCors, siteRule } from './cors'
import { S3Error } from './errors'
import type { CorsRule } from './records'
import { parseRequest } from './request'
import { runOperation } from './routes'
import { verifyRequest, type Credentials } from './signature'
import { Store } from './store'
import { errorDocument, leaf } from './xml'

export interface StorageServerOptions extends Credentials, Partial<Omit<StorageOptions, 'region'>> {
  dataDir: string
  host: string
  /** 0 takes any free port. */
  port: number
  /** Origins that browsers may come from, besides those set on a bucket. */
  corsOrigins?: string[]
  /** Unfinished uploads that nothing was added to for this long are dropped. */
  uploadExpiryMs?: number
  log?: (line: string) => void
}

export interface StorageServer { url: string, port: number, close(): Promise<void> }

const MIB = 1024 ** 2
const HOUR_MS = 3_600_000
const DRAIN_BYTES = 64 * MIB
const DRAIN_MS = 10_000
const CLOSE_GRACE_MS = 5000

/** Starts Ribband's own S3-compatible storage. One folder can be served by one server at a time. */
export async function startStorageServer(options: StorageServerOptions): Promise<StorageServer> {
  const log = options.log ?? ((line: string) => void process.stderr.write(`storage: ${line}\n`))
  const store = await Store.open(options.dataDir, log)
  const settings: StorageOptions = {
    region: options.region,
    mediaRangeCapBytes: options.mediaRangeCapBytes ?? MIB,
    idleTimeoutMs: options.idleTimeoutMs ?? 120_000,
  }
  const common: CorsRule[] = options.corsOrigins?.length ? [siteRule(options.corsOrigins)] : []

  /** Whether the client still holds its body back, and so has nothing that needs draining. */
  const waiting = new WeakMap<IncomingMessage, boolean>()

  async function serve(message: IncomingMessage, response: ServerResponse, awaitsContinue: boolean): Promise<void> {
    response.setHeader('x-amz-request-id', randomBytes(8).toString('hex').toUpperCase())
    const request = parseRequest(message)
    const rules = [...(store.find(request.bucket)?.record.cors ?? []), ...common]
    if (request.method === 'OPTIONS') return answerPreflight(response, request, rules)
    applyCors(response, request, rules)
    const payload = verifyRequest(request, options)
    const exchange = { request, message, response, payload, awaitsContinue, store, options: settings }
    try {
      await runOperation(exchange)
    }
    finally {
      waiting.set(message, exchange.awaitsContinue)
    }
  }

  async function handle(message: IncomingMessage, response: ServerResponse, awaitsContinue: boolean): Promise<void> {
    waiting.set(message, awaitsContinue)
    try {
      await serve(message, response, awaitsContinue)
    }
    catch (error) {
      const known = asS3Error(error)
      if (!known && !response.destroyed && !message.destroyed) log(`${message.method} ${String(message.url).split('?')[0]}: ${String(error)}`)
      await refuse(message, response, known ?? new S3Error(500, 'InternalError', 'We encountered an internal error. Please try again.'))
    }
  }

  async function refuse(message: IncomingMessage, response: ServerResponse, error: S3Error): Promise<void> {
    if (response.headersSent || response.destroyed) return void response.destroy()
    const heldBack = waiting.get(message) === true
    const drained = !heldBack && await drain({ message }, DRAIN_BYTES, DRAIN_MS)
    if (response.destroyed) return
    if (!drained) response.setHeader('connection', 'close')
    for (const [name, value] of Object.entries(error.headers)) response.setHeader(name, value)
    const body = message.method === 'HEAD' ? '' : errorDocument(leaf('Code', error.code), leaf('Message', error.message), leaf('RequestId', String(response.getHeader('x-amz-request-id') ?? '')))
    response.writeHead(error.status, { 'content-type': 'application/xml', 'content-length': Buffer.byteLength(body) })
    response.end(body)
  }

  // A slow phone may take hours over one part: only silence ends a request, not its length.
  const server = createServer({ requestTimeout: 0, headersTimeout: 60_000, keepAliveTimeout: 30_000, highWaterMark: 256 * 1024 })
  server.on('request', (message, response) => void handle(message, response, false))
  server.on('checkContinue', (message, response) => void handle(message, response, true))

  try {
    await new Promise<void>((resolve, reject) => {
      server.once('error', reject)
      server.listen(options.port, options.host, resolve)
    })
  }
  catch (error) {
    await store.close()
    throw error
  }
  const expiryMs = options.uploadExpiryMs ?? 7 * 24 * HOUR_MS
  const expire = () => store.expireUploads(Date.now() - expiryMs).catch((error: unknown) => log(String(error)))
  await expire()
  const timer = setInterval(() => void expire(), HOUR_MS)
  timer.unref()

  const { port } = server.address() as AddressInfo
  let closing: Promise<void> | null = null
  async function shutDown(): Promise<void> {
    clearInterval(timer)
    const force = setTimeout(() => server.closeAllConnections(), CLOSE_GRACE_MS)
    await new Promise<void>((resolve) => {
      server.close(() => resolve())
      server.closeIdleConnections()
    })
    clearTimeout(force)
    await store.close()
  }
  return { url: `http://${options.host}:${port}`, port, close: () => closing ??= shutDown() }
}

function asS3Error(error: unknown): S3Error | null {
  if (error instanceof S3Error) return error
  const code = (error as NodeJS.ErrnoException | null)?.code
  if (code === 'ENOSPC' || code === 'EDQUOT') return new S3Error(507, 'InsufficientStorage', 'The disk is full. Nothing was changed. Make room and try again.')
  return null
}
