import type { Exchange, Operation } from './context'
import { invalidRequest, notImplemented, S3Error } from './errors'
import * as buckets from './operations/buckets'
import * as multipart from './operations/multipart'
import * as objects from './operations/objects'
import type { S3Request } from './request'

/** What a route knows of the query. Anything else is refused, so that nothing asked for is silently skipped. */
interface Route { run: Operation, params?: string[] }

const LIST_PARAMS = ['prefix', 'delimiter', 'max-keys', 'encoding-type', 'continuation-token', 'start-after', 'fetch-owner']
const OVERRIDE_PARAMS = ['content-type', 'content-language', 'expires', 'cache-control', 'content-disposition', 'content-encoding'].map(name => `response-${name}`)

/** Keyed by method, level and sub-resource. */
const ROUTES: Record<string, Route> = {
  'GET service': { run: buckets.listBuckets, params: ['max-buckets', 'prefix', 'bucket-region', 'continuation-token'] },
  'PUT bucket': { run: buckets.createBucket },
  'HEAD bucket': { run: buckets.headBucket },
  'DELETE bucket': { run: buckets.deleteBucket },
  'GET bucket location': { run: buckets.getBucketLocation },
  'GET bucket cors': { run: buckets.getBucketCors },
  'PUT bucket cors': { run: buckets.putBucketCors },
  'DELETE bucket cors': { run: buckets.deleteBucketCors },
  'GET bucket list-type': { run: buckets.listObjects, params: LIST_PARAMS },
  'GET bucket uploads': { run: multipart.listMultipartUploads, params: ['prefix', 'encoding-type', 'key-marker', 'upload-id-marker', 'max-uploads'] },
  'POST bucket delete': { run: buckets.deleteObjects },
  'GET object': { run: objects.getObject, params: OVERRIDE_PARAMS },
  'HEAD object': { run: objects.getObject, params: OVERRIDE_PARAMS },
  'PUT object': { run: objects.putObject },
  'DELETE object': { run: objects.deleteObject },
  'POST object uploads': { run: multipart.createMultipartUpload },
  'PUT object uploadId': { run: multipart.uploadPart, params: ['partNumber'] },
  'GET object uploadId': { run: multipart.listParts, params: ['max-parts', 'part-number-marker'] },
  'POST object uploadId': { run: multipart.completeMultipartUpload },
  'DELETE object uploadId': { run: multipart.abortMultipartUpload },
}

const SUB_RESOURCES = ['location', 'cors', 'list-type', 'uploads', 'uploadId', 'delete']
const ANYWHERE = /^(?:X-Amz-.*|x-id|x-amz-checksum-mode)$/
const KNOWN_HEADERS = /^x-amz-(?:date|content-sha256|decoded-content-length|trailer|checksum-[\w-]+|sdk-checksum-algorithm|meta-.+|copy-source(?:-if-[\w-]+)?|metadata-directive|mp-object-size|user-agent|request-payer)$/
/** Headers that ask for what this storage does anyway. */
const DEFAULTS: Record<string, string> = { 'x-amz-acl': 'private', 'x-amz-storage-class': 'STANDARD' }

export function findOperation(request: S3Request): Operation {
  const level = request.key ? 'object' : request.bucket ? 'bucket' : 'service'
  const names = request.query.map(([name]) => name)
  const sub = SUB_RESOURCES.find(name => names.includes(name))
  const route = ROUTES[[request.method, level, ...(sub ? [sub] : [])].join(' ')]
  if (!route) {
    if (!sub && !['GET', 'HEAD', 'PUT', 'POST', 'DELETE'].includes(request.method)) throw new S3Error(405, 'MethodNotAllowed', 'The specified method is not allowed against this resource.')
    throw notImplemented(`${request.method} on ${level}${sub ? ` with ${sub}` : ''}`)
  }
  const strange = names.find(name => name !== sub && !route.params?.includes(name) && !ANYWHERE.test(name))
  if (strange) throw notImplemented(`the parameter ${strange} here`)
  if (sub === 'list-type' && request.param(sub) !== '2') throw notImplemented('this version of the listing')
  checkKey(request.key)
  checkHeaders(request)
  if (request.headers['x-amz-copy-source'] === undefined) return route.run
  if (route.run !== objects.putObject) throw notImplemented('copying here')
  return objects.copyObject
}

function checkKey(key: string): void {
  if (Buffer.byteLength(key) > 1024) throw new S3Error(400, 'KeyTooLongError', 'Your key is too long')
  // eslint-disable-next-line no-control-regex -- XML answers could not name such a key
  if (/[\0-\x1F\x7F\uFFFE\uFFFF]/.test(key)) throw invalidRequest('Keys may not hold control characters.')
}

function checkHeaders(request: S3Request): void {
  for (const [name, value] of Object.entries(request.headers)) {
    if (!name.startsWith('x-amz-') || KNOWN_HEADERS.test(name)) continue
    if (DEFAULTS[name] !== value) throw notImplemented(`the header ${name}`)
  }
}

export async function runOperation(exchange: Exchange): Promise<void> {
  await findOperation(exchange.request)(exchange)
}
