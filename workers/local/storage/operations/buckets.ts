import { readXml } from '../body'
import { sendEmpty, sendXml, type Exchange } from '../context'
import { corsDocument, parseCors } from '../cors'
import { invalidArgument, malformedXml, S3Error } from '../errors'
import { wholeParam, type S3Request } from '../request'
import { uriEncode } from '../signature'
import { pageOfKeys } from '../sortedKeys'
import { branch, childrenNamed, document, leaf, textOf } from '../xml'

export async function listBuckets({ store, response }: Exchange): Promise<void> {
  const buckets = store.list().map(({ record }) => branch('Bucket', leaf('Name', record.name), leaf('CreationDate', record.created)))
  sendXml(response, document('ListAllMyBucketsResult', branch('Owner', leaf('ID', 'owner'), leaf('DisplayName', 'owner')), branch('Buckets', ...buckets)))
}

export async function createBucket(exchange: Exchange): Promise<void> {
  const { request, store, response, options } = exchange
  if (Number(request.headers['content-length'] ?? 0) > 0) {
    const asked = textOf(await readXml(exchange), 'LocationConstraint')
    if (asked && asked !== options.region) throw new S3Error(400, 'IllegalLocationConstraintException', `This storage only serves the region ${options.region}.`)
  }
  await store.createBucket(request.bucket)
  sendEmpty(response, 200, { location: `/${request.bucket}` })
}

export async function headBucket({ request, store, response, options }: Exchange): Promise<void> {
  store.bucket(request.bucket)
  sendEmpty(response, 200, { 'x-amz-bucket-region': options.region })
}

export async function deleteBucket({ request, store, response }: Exchange): Promise<void> {
  await store.removeBucket(request.bucket)
  sendEmpty(response, 204)
}

export async function getBucketLocation({ request, store, response, options }: Exchange): Promise<void> {
  store.bucket(request.bucket)
  sendXml(response, document('LocationConstraint', options.region === 'us-east-1' ? '' : options.region))
}

export async function getBucketCors({ request, store, response }: Exchange): Promise<void> {
  const { record } = store.bucket(request.bucket)
  if (!record.cors.length) throw new S3Error(404, 'NoSuchCORSConfiguration', 'The CORS configuration does not exist.')
  sendXml(response, corsDocument(record.cors))
}

export async function putBucketCors(exchange: Exchange): Promise<void> {
  const bucket = exchange.store.bucket(exchange.request.bucket)
  await bucket.setCors(parseCors(await readXml(exchange)))
  sendEmpty(exchange.response, 200)
}

export async function deleteBucketCors({ request, store, response }: Exchange): Promise<void> {
  await store.bucket(request.bucket).setCors([])
  sendEmpty(response, 204)
}

/** Keys may hold characters that XML cannot; clients then ask for them percent-encoded. */
export function keyWriter(request: S3Request): (text: string) => string {
  const encoding = request.param('encoding-type')
  if (encoding !== undefined && encoding !== 'url') throw invalidArgument('Invalid Encoding Method specified in Request')
  return encoding ? text => uriEncode(text, true) : text => text
}

export async function listObjects({ request, store, response }: Exchange): Promise<void> {
  const bucket = store.bucket(request.bucket)
  const write = keyWriter(request)
  const [prefix, delimiter, token] = [request.param('prefix') ?? '', request.param('delimiter') ?? '', request.param('continuation-token')]
  if (token !== undefined && !/^[\w-]+$/.test(token)) throw invalidArgument('The continuation token provided is incorrect')
  const startAfter = request.param('start-after')
  const after = token === undefined ? startAfter ?? '' : Buffer.from(token, 'base64url').toString()
  const max = wholeParam(request, 'max-keys', 1000, 0, 1000)
  const page = pageOfKeys(bucket.sortedKeys(), { prefix, delimiter, after, max })
  const contents = page.keys.map((key) => {
    const object = bucket.objects.get(key)!
    return branch('Contents', leaf('Key', write(key)), leaf('LastModified', object.lastModified), leaf('ETag', `"${object.etag}"`), leaf('Size', object.sizeBytes), leaf('StorageClass', 'STANDARD'))
  })
  sendXml(response, document('ListBucketResult',
    leaf('Name', request.bucket), leaf('Prefix', write(prefix)), leaf('MaxKeys', max), leaf('KeyCount', page.keys.length + page.prefixes.length),
    ...(delimiter ? [leaf('Delimiter', write(delimiter))] : []),
    ...(startAfter === undefined ? [] : [leaf('StartAfter', write(startAfter))]),
    ...(request.param('encoding-type') ? [leaf('EncodingType', 'url')] : []),
    ...(token === undefined ? [] : [leaf('ContinuationToken', token)]),
    leaf('IsTruncated', page.next !== null),
    ...(page.next === null ? [] : [leaf('NextContinuationToken', Buffer.from(page.next).toString('base64url'))]),
    ...contents,
    ...page.prefixes.map(value => branch('CommonPrefixes', leaf('Prefix', write(value)))),
  ))
}

export async function deleteObjects(exchange: Exchange): Promise<void> {
  const bucket = exchange.store.bucket(exchange.request.bucket)
  const { headers } = exchange.request
  const checked = headers['content-md5'] ?? Object.keys(headers).find(name => name.startsWith('x-amz-checksum-')) ?? headers['x-amz-trailer']
  if (!checked && exchange.payload.kind !== 'sha256') throw new S3Error(400, 'InvalidRequest', 'Missing required header for this request: Content-MD5 or a checksum.')
  const root = await readXml(exchange)
  const items = childrenNamed(root, 'Object')
  if (root.name !== 'Delete' || items.length === 0 || items.length > 1000) throw malformedXml()
  const keys = items.map(item => textOf(item, 'Key') ?? '')
  if (keys.includes('')) throw malformedXml()
  for (const key of keys) await bucket.removeObject(key)
  const quiet = textOf(root, 'Quiet') === 'true'
  sendXml(exchange.response, document('DeleteResult', ...(quiet ? [] : keys.map(key => branch('Deleted', leaf('Key', key))))))
}
