import { createHash } from 'node:crypto'
import { request as send } from 'node:http'
import { Sha256 } from '@aws-crypto/sha256-js'
import { SignatureV4 } from '@smithy/signature-v4'

/** Signing by the SDK's own signer, and sending bytes exactly as given, for tests of the storage. */
export interface SigningKeys { accessKeyId: string, secretAccessKey: string, region: string }

export interface PlainRequest {
  method: string
  /** As it goes over the wire: already percent-encoded. */
  path: string
  query?: Record<string, string>
  headers: Record<string, string>
}

export function signerFor(keys: SigningKeys): SignatureV4 {
  return new SignatureV4({ credentials: keys, region: keys.region, service: 's3', sha256: Sha256, uriEscapePath: false, applyChecksum: false })
}

export const sha256Hex = (body: string | Buffer) => createHash('sha256').update(body).digest('hex')

const asHttp = (request: PlainRequest) => ({ ...request, protocol: 'http:', hostname: request.headers.host!.split(':')[0]!, query: request.query ?? {} })

/** Adds the Authorization header. `x-amz-content-sha256` must be among the headers. */
export async function signHeaders(request: PlainRequest, keys: SigningKeys, signingDate = new Date()): Promise<PlainRequest> {
  const signed = await signerFor(keys).sign(asHttp(request), { signingDate })
  return { ...request, headers: signed.headers }
}

export async function presign(request: PlainRequest, keys: SigningKeys, expiresIn: number, signingDate = new Date()): Promise<PlainRequest> {
  const hash = { 'x-amz-content-sha256': 'UNSIGNED-PAYLOAD' }
  const own = new Set(Object.keys(hash))
  const signed = await signerFor(keys).presign(asHttp({ ...request, headers: { ...request.headers, ...hash } }), { expiresIn, signingDate, unsignableHeaders: own, unhoistableHeaders: own })
  return { ...request, query: signed.query as Record<string, string> }
}

export function targetOf(request: PlainRequest): string {
  const query = Object.entries(request.query ?? {}).map(([name, value]) => `${encodeURIComponent(name)}=${encodeURIComponent(value)}`).join('&')
  return query ? `${request.path}?${query}` : request.path
}

export interface RawAnswer { status: number, headers: Record<string, string | string[] | undefined>, body: Buffer, code: string | undefined }

/** Sends without any normalising of the path, as a hostile client would. */
export function sendRaw(endpoint: string, request: PlainRequest, body: Buffer | string = ''): Promise<RawAnswer> {
  const { hostname, port } = new URL(endpoint)
  const length = request.headers['transfer-encoding'] ? {} : { 'content-length': Buffer.byteLength(body) }
  return new Promise((resolve, reject) => {
    const outgoing = send({ hostname, port, method: request.method, path: targetOf(request), headers: { ...length, ...request.headers }, agent: false }, (incoming) => {
      const pieces: Buffer[] = []
      incoming.on('data', piece => pieces.push(piece))
      incoming.on('error', reject)
      incoming.on('end', () => {
        const answer = Buffer.concat(pieces)
        resolve({ status: incoming.statusCode!, headers: incoming.headers, body: answer, code: /<Code>(\w+)<\/Code>/.exec(answer.toString())?.[1] })
      })
    })
    outgoing.on('error', reject)
    outgoing.end(body)
  })
}
