import { openBody } from '../body'
import { assertMayWrite, mayRead, rangeStillValid, type Validators } from '../conditions'
import { sendEmpty, sendXml, type Exchange } from '../context'
import { invalidArgument, invalidRequest, noSuchKey, S3Error } from '../errors'
import { capForMedia, isPortioned, parseRange } from '../range'
import { KEPT_HEADERS, type Attributes, type ObjectRecord } from '../records'
import { parseQuery, type S3Request } from '../request'
import { document, leaf } from '../xml'

const MAX_METADATA_BYTES = 2048
const MAX_COPY_BYTES = 5 * 1024 ** 3
const OVERRIDES = ['content-type', 'content-language', 'expires', 'cache-control', 'content-disposition', 'content-encoding']

export function validatorsOf(record: ObjectRecord): Validators {
  return { etag: record.etag, lastModified: new Date(record.lastModified) }
}

export const checkWrite = (request: S3Request) => (current: ObjectRecord | null) => {
  assertMayWrite(request.headers, current && validatorsOf(current))
}

/** What a PUT, a Copy with REPLACE or a new multipart upload says about the object. */
export function attributesOf(request: S3Request): Attributes {
  const attributes: Attributes = { headers: {}, metadata: {} }
  for (const name of KEPT_HEADERS) {
    // `aws-chunked` describes the way here, not the object.
    const value = request.headers[name]?.split(',').map(item => item.trim()).filter(item => name !== 'content-encoding' || item !== 'aws-chunked').join(', ')
    if (value) attributes.headers[name] = value
  }
  let size = 0
  for (const [name, value] of Object.entries(request.headers)) {
    if (!name.startsWith('x-amz-meta-')) continue
    attributes.metadata[name.slice('x-amz-meta-'.length)] = value
    size += name.length + value.length
  }
  if (size > MAX_METADATA_BYTES) throw new S3Error(400, 'MetadataTooLarge', 'Your metadata headers exceed the maximum allowed metadata size.')
  return attributes
}

export async function putObject(exchange: Exchange): Promise<void> {
  const { request, store, response } = exchange
  const bucket = store.bucket(request.bucket)
  const attributes = attributesOf(request)
  const body = openBody(exchange)
  checkWrite(request)(bucket.objects.get(request.key) ?? null)
  const extent = await store.blobs.write(body.bytes, bytes => body.digests.update(bytes))
  try {
    const { md5, checksums } = body.verify()
    const record: ObjectRecord = {
      key: request.key, sizeBytes: extent.sizeBytes, etag: md5.toString('hex'), lastModified: new Date().toISOString(),
      checksums, extents: [extent], ...attributes,
    }
    await bucket.putObject(record, checkWrite(request))
    sendEmpty(response, 200, { etag: `"${record.etag}"`, ...checksumHeaders(checksums) })
  }
  catch (error) {
    store.blobs.discard([extent])
    throw error
  }
}

export function checksumHeaders(checksums: Record<string, string>): Record<string, string> {
  return Object.fromEntries(Object.entries(checksums).map(([name, value]) => [`x-amz-checksum-${name}`, value]))
}

function describe(request: S3Request, record: ObjectRecord): Record<string, string> {
  const headers: Record<string, string> = {
    'content-type': 'binary/octet-stream',
    ...record.headers,
    'etag': `"${record.etag}"`,
    'last-modified': new Date(record.lastModified).toUTCString(),
    'accept-ranges': 'bytes',
    // Stored bytes come from users: browsers must not guess a livelier type for them.
    'x-content-type-options': 'nosniff',
    'cross-origin-resource-policy': 'cross-origin',
  }
  for (const [name, value] of Object.entries(record.metadata)) headers[`x-amz-meta-${name}`] = value
  if (request.headers['x-amz-checksum-mode'] === 'ENABLED' && !request.headers.range) Object.assign(headers, checksumHeaders(record.checksums))
  for (const name of OVERRIDES) {
    const value = request.param(`response-${name}`)
    if (value === undefined) continue
    if (!/^[\t\x20-\x7E\x80-\xFF]*$/.test(value)) throw invalidArgument(`response-${name} holds characters that a header cannot.`)
    headers[name] = value
  }
  return headers
}

/** GET and HEAD. */
export async function getObject(exchange: Exchange): Promise<void> {
  const { request, response, store, options } = exchange
  const record = store.bucket(request.bucket).objects.get(request.key)
  if (!record) throw noSuchKey()
  const unpin = store.blobs.pin(record.extents)
  try {
    const headers = describe(request, record)
    if (!mayRead(request.headers, validatorsOf(record))) {
      delete headers['content-type']
      response.writeHead(304, headers)
      response.end()
      return
    }
    const asked = rangeStillValid(request.headers['if-range'], validatorsOf(record)) ? request.headers.range : undefined
    const whole = parseRange(asked, record.sizeBytes)
    const portioned = isPortioned(request.headers, headers['content-type']!, options.mediaRangeCapBytes)
    const range = portioned ? capForMedia(whole, options.mediaRangeCapBytes) : whole
    if (portioned) headers['cache-control'] = 'no-store'
    if (range.kind === 'unsatisfiable') {
      throw new S3Error(416, 'InvalidRange', 'The requested range is not satisfiable', { 'content-range': `bytes */${record.sizeBytes}` })
    }
    const [start, end] = range.kind === 'part' ? [range.start, range.end] : [0, record.sizeBytes - 1]
    if (range.kind === 'part') headers['content-range'] = `bytes ${start}-${end}/${record.sizeBytes}`
    headers['content-length'] = String(end - start + 1)
    await store.blobs.check(record.extents, start, end)
    response.writeHead(range.kind === 'part' ? 206 : 200, headers)
    if (request.method === 'HEAD') response.end()
    else await store.blobs.send(record.extents, start, end, response)
  }
  finally {
    unpin()
  }
}

export async function deleteObject({ request, store, response }: Exchange): Promise<void> {
  await store.bucket(request.bucket).removeObject(request.key)
  sendEmpty(response, 204)
}

function copySource(request: S3Request): { bucket: string, key: string } {
  let path: string
  const [raw = '', query] = request.headers['x-amz-copy-source']!.split('?')
  try {
    path = decodeURIComponent(raw).replace(/^\//, '')
  }
  catch {
    throw invalidArgument('The copy source must be URL-encoded.')
  }
  const slash = path.indexOf('/')
  if (slash < 1 || slash === path.length - 1) throw invalidArgument('Copy Source must mention the source bucket and key: sourcebucket/sourcekey')
  if (query && parseQuery(query).length) throw invalidArgument('Versions are not supported.')
  return { bucket: path.slice(0, slash), key: path.slice(slash + 1) }
}

export async function copyObject({ request, store, response }: Exchange): Promise<void> {
  const from = copySource(request)
  const target = store.bucket(request.bucket)
  const source = store.bucket(from.bucket).objects.get(from.key)
  if (!source) throw noSuchKey()
  const directive = request.headers['x-amz-metadata-directive'] ?? 'COPY'
  if (directive !== 'COPY' && directive !== 'REPLACE') throw invalidArgument('Unknown metadata directive.')
  if (directive === 'COPY' && source === target.objects.get(request.key)) throw invalidRequest('This copy request is illegal because it copies an object to itself without changing its metadata.')
  if (source.sizeBytes > MAX_COPY_BYTES) throw invalidRequest('The specified copy source is larger than the maximum allowable size for a copy source: 5368709120')
  const unpin = store.blobs.pin(source.extents)
  try {
    if (!mayRead(request.headers, validatorsOf(source), 'x-amz-copy-source-')) throw new S3Error(412, 'PreconditionFailed', 'At least one of the preconditions you specified did not hold.')
    const extents = await store.blobs.clone(source.extents)
    const record: ObjectRecord = {
      key: request.key, sizeBytes: source.sizeBytes, etag: source.etag, lastModified: new Date().toISOString(), checksums: source.checksums, extents,
      ...(directive === 'REPLACE' ? attributesOf(request) : { headers: source.headers, metadata: source.metadata }),
    }
    try {
      await target.putObject(record, checkWrite(request))
    }
    catch (error) {
      store.blobs.discard(extents)
      throw error
    }
    sendXml(response, document('CopyObjectResult', leaf('LastModified', record.lastModified), leaf('ETag', `"${record.etag}"`)))
  }
  finally {
    unpin()
  }
}
