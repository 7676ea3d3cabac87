import { createHash } from 'node:crypto'
import { openBody, readXml } from '../body'
import { sendEmpty, sendXml, type Exchange } from '../context'
import { invalidArgument, invalidRequest, malformedXml, S3Error } from '../errors'
import type { ObjectRecord, PartRecord, Upload } from '../records'
import { wholeParam, type S3Request } from '../request'
import { compareKeys } from '../sortedKeys'
import { branch, childrenNamed, document, leaf, textOf, type XmlElement } from '../xml'
import { keyWriter } from './buckets'
import { attributesOf, checksumHeaders, checkWrite } from './objects'

/** S3's own limits: 10,000 parts, each but the last at least 5 MiB. */
const MAX_PART_NUMBER = 10_000
const MIN_PART_BYTES = 5 * 1024 ** 2

export async function createMultipartUpload({ request, store, response }: Exchange): Promise<void> {
  const upload = await store.bucket(request.bucket).createUpload(request.key, attributesOf(request))
  sendXml(response, document('InitiateMultipartUploadResult', leaf('Bucket', request.bucket), leaf('Key', request.key), leaf('UploadId', upload.uploadId)))
}

export async function uploadPart(exchange: Exchange): Promise<void> {
  const { request, store, response } = exchange
  const bucket = store.bucket(request.bucket)
  const upload = bucket.upload(request.key, request.param('uploadId'))
  const number = request.param('partNumber') ?? ''
  const partNumber = /^\d{1,5}$/.test(number) ? Number(number) : 0
  if (partNumber < 1 || partNumber > MAX_PART_NUMBER) throw invalidArgument(`Part number must be an integer between 1 and ${MAX_PART_NUMBER}, inclusive`)
  const body = openBody(exchange)
  const extent = await store.blobs.write(body.bytes, (bytes) => {
    upload.touchedMs = Date.now()
    body.digests.update(bytes)
  })
  try {
    const { md5, checksums } = body.verify()
    const part: PartRecord = { partNumber, etag: md5.toString('hex'), lastModified: new Date().toISOString(), checksums, ...extent }
    await bucket.putPart(upload, part)
    sendEmpty(response, 200, { etag: `"${part.etag}"`, ...checksumHeaders(checksums) })
  }
  catch (error) {
    store.blobs.discard([extent])
    throw error
  }
}

export async function listParts({ request, store, response }: Exchange): Promise<void> {
  const upload = store.bucket(request.bucket).upload(request.key, request.param('uploadId'))
  const marker = wholeParam(request, 'part-number-marker', 0, 0, MAX_PART_NUMBER)
  const max = wholeParam(request, 'max-parts', 1000, 1, 1000)
  const rest = [...upload.parts.values()].filter(part => part.partNumber > marker).sort((a, b) => a.partNumber - b.partNumber)
  const page = rest.slice(0, max)
  const truncated = rest.length > page.length
  sendXml(response, document('ListPartsResult',
    leaf('Bucket', request.bucket), leaf('Key', upload.key), leaf('UploadId', upload.uploadId), leaf('PartNumberMarker', marker), leaf('MaxParts', max),
    leaf('IsTruncated', truncated), ...(truncated ? [leaf('NextPartNumberMarker', page[page.length - 1]!.partNumber)] : []),
    ...page.map(part => branch('Part', leaf('PartNumber', part.partNumber), leaf('LastModified', part.lastModified), leaf('ETag', `"${part.etag}"`), leaf('Size', part.sizeBytes))),
  ))
}

export async function listMultipartUploads({ request, store, response }: Exchange): Promise<void> {
  const write = keyWriter(request)
  const prefix = request.param('prefix') ?? ''
  const [keyMarker, idMarker] = [request.param('key-marker') ?? '', request.param('upload-id-marker') ?? '']
  const max = wholeParam(request, 'max-uploads', 1000, 1, 1000)
  const order = (a: { key: string, uploadId: string }, b: { key: string, uploadId: string }) => compareKeys(a.key, b.key) || compareKeys(a.uploadId, b.uploadId)
  const isAfter = (upload: Upload) => {
    if (!keyMarker) return true
    return idMarker ? order(upload, { key: keyMarker, uploadId: idMarker }) > 0 : compareKeys(upload.key, keyMarker) > 0
  }
  const rest = [...store.bucket(request.bucket).uploads.values()].filter(upload => upload.key.startsWith(prefix) && isAfter(upload)).sort(order)
  const page = rest.slice(0, max)
  const last = rest.length > page.length ? page[page.length - 1] : undefined
  sendXml(response, document('ListMultipartUploadsResult',
    leaf('Bucket', request.bucket), leaf('Prefix', write(prefix)), leaf('KeyMarker', write(keyMarker)), leaf('UploadIdMarker', idMarker), leaf('MaxUploads', max),
    ...(request.param('encoding-type') ? [leaf('EncodingType', 'url')] : []),
    leaf('IsTruncated', last !== undefined),
    ...(last ? [leaf('NextKeyMarker', write(last.key)), leaf('NextUploadIdMarker', last.uploadId)] : []),
    ...page.map(upload => branch('Upload', leaf('Key', write(upload.key)), leaf('UploadId', upload.uploadId), leaf('Initiated', upload.initiated), leaf('StorageClass', 'STANDARD'))),
  ))
}

export async function abortMultipartUpload({ request, store, response }: Exchange): Promise<void> {
  const bucket = store.bucket(request.bucket)
  await bucket.abortUpload(bucket.upload(request.key, request.param('uploadId')))
  sendEmpty(response, 204)
}

interface ChosenPart { partNumber: number, etag: string, checksums: Record<string, string> }

function readChosen(root: XmlElement): ChosenPart[] {
  const parts = childrenNamed(root, 'Part').map((part) => {
    const [number, etag] = [textOf(part, 'PartNumber')?.trim() ?? '', textOf(part, 'ETag')?.trim()]
    if (!/^\d{1,5}$/.test(number) || !etag) throw malformedXml()
    const checksums: Record<string, string> = {}
    for (const { name, text } of part.children) {
      if (name.startsWith('Checksum')) checksums[name.slice('Checksum'.length).toLowerCase()] = text.trim()
    }
    return { partNumber: Number(number), etag: etag.replace(/^"|"$/g, ''), checksums }
  })
  if (root.name !== 'CompleteMultipartUpload' || parts.length === 0 || parts.length > MAX_PART_NUMBER) throw malformedXml()
  return parts
}

function chooseParts(upload: Upload, chosen: ChosenPart[]): PartRecord[] {
  return chosen.map(({ partNumber, etag, checksums }, index) => {
    if (index > 0 && partNumber <= chosen[index - 1]!.partNumber) throw new S3Error(400, 'InvalidPartOrder', 'The list of parts was not in ascending order. Parts must be ordered by part number.')
    const part = upload.parts.get(partNumber)
    const agrees = part && part.etag === etag && Object.entries(checksums).every(([name, value]) => part.checksums[name] === undefined || part.checksums[name] === value)
    if (!part || !agrees) throw new S3Error(400, 'InvalidPart', `Part ${partNumber} could not be found. It may not have been uploaded, or its ETag may not match.`)
    if (index < chosen.length - 1 && part.sizeBytes < MIN_PART_BYTES) throw new S3Error(400, 'EntityTooSmall', 'Your proposed upload is smaller than the minimum allowed size')
    return part
  })
}

function joinParts(request: S3Request, upload: Upload, chosen: ChosenPart[]): { record: ObjectRecord, chosen: Set<number> } {
  const parts = chooseParts(upload, chosen)
  const sizeBytes = parts.reduce((sum, part) => sum + part.sizeBytes, 0)
  const announced = request.headers['x-amz-mp-object-size']
  if (announced !== undefined && Number(announced) !== sizeBytes) throw invalidRequest(`The provided 'x-amz-mp-object-size' header does not match what was uploaded.`)
  const etag = createHash('md5').update(Buffer.concat(parts.map(part => Buffer.from(part.etag, 'hex')))).digest('hex')
  const record: ObjectRecord = {
    key: upload.key, sizeBytes, etag: `${etag}-${parts.length}`, lastModified: new Date().toISOString(),
    headers: upload.headers, metadata: upload.metadata, checksums: {},
    extents: parts.map(({ blob, sizeBytes: partBytes }) => ({ blob, sizeBytes: partBytes })),
    uploadId: upload.uploadId,
  }
  return { record, chosen: new Set(parts.map(part => part.partNumber)) }
}

export async function completeMultipartUpload(exchange: Exchange): Promise<void> {
  const { request, store, response } = exchange
  const bucket = store.bucket(request.bucket)
  const uploadId = request.param('uploadId')
  const chosen = readChosen(await readXml(exchange))
  const standing = bucket.objects.get(request.key)
  // The answer to an earlier Complete may have been lost on the way: give it again.
  const record = standing?.uploadId !== undefined && standing.uploadId === uploadId
    ? standing
    : await (async () => {
        const upload = bucket.upload(request.key, uploadId)
        return bucket.completeUpload(upload, () => joinParts(request, upload, chosen), checkWrite(request))
      })()
  sendXml(response, document('CompleteMultipartUploadResult',
    leaf('Location', `/${request.bucket}/${request.key}`), leaf('Bucket', request.bucket), leaf('Key', request.key), leaf('ETag', `"${record.etag}"`)))
}
