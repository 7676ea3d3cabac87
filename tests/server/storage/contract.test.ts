import { createHash, randomBytes } from 'node:crypto'
import { Readable } from 'node:stream'
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CopyObjectCommand, CreateBucketCommand, CreateMultipartUploadCommand,
  DeleteObjectCommand, DeleteObjectsCommand, GetBucketCorsCommand, GetObjectCommand, HeadBucketCommand, HeadObjectCommand, ListBucketsCommand,
  ListMultipartUploadsCommand, ListObjectsV2Command, ListPartsCommand, paginateListObjectsV2, PutObjectCommand, UploadPartCommand,
  type GetObjectCommandInput, type PutObjectCommandInput,
} from '@aws-sdk/client-s3'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openS3Target, type S3Target } from '../../support/s3Target'

/** What Ribband relies on in any S3 service, driven through the official SDK with its default settings. */
const MIB = 1024 ** 2
let target: S3Target
let Bucket: string
beforeAll(async () => {
  target = await openS3Target()
  Bucket = target.config.bucket
})
afterAll(() => target.stop())

const put = (Key: string, Body: PutObjectCommandInput['Body'], more: Partial<PutObjectCommandInput> = {}) => target.sdk.send(new PutObjectCommand({ Bucket, Key, Body, ...more }))
const md5 = (bytes: Buffer) => createHash('md5').update(bytes).digest('hex')
async function get(Key: string, more: Partial<GetObjectCommandInput> = {}) {
  const answer = await target.sdk.send(new GetObjectCommand({ Bucket, Key, ...more }))
  return { ...answer, bytes: Buffer.from(await answer.Body!.transformToByteArray()) }
}
const failure = (name: string, status: number) => expect.objectContaining({ name, $metadata: expect.objectContaining({ httpStatusCode: status }) })

async function begin(Key: string): Promise<string> {
  return (await target.sdk.send(new CreateMultipartUploadCommand({ Bucket, Key, ContentType: 'video/mp4', Metadata: { made: 'here' } }))).UploadId!
}
async function sendPart(Key: string, UploadId: string, PartNumber: number, Body: Buffer) {
  const { ETag, ChecksumCRC32 } = await target.sdk.send(new UploadPartCommand({ Bucket, Key, UploadId, PartNumber, Body }))
  return { PartNumber, ETag: ETag!, ChecksumCRC32 }
}
const complete = (Key: string, UploadId: string, Parts: { PartNumber: number, ETag: string }[]) =>
  target.sdk.send(new CompleteMultipartUploadCommand({ Bucket, Key, UploadId, MultipartUpload: { Parts } }))

describe('buckets', () => {
  it('are made, found and listed', async () => {
    await target.sdk.send(new HeadBucketCommand({ Bucket }))
    expect((await target.sdk.send(new ListBucketsCommand({}))).Buckets!.map(({ Name }) => Name)).toContain(Bucket)
    await expect(target.sdk.send(new HeadBucketCommand({ Bucket: `${Bucket}-not` }))).rejects.toEqual(failure('NotFound', 404))
    await expect(target.sdk.send(new PutObjectCommand({ Bucket: `${Bucket}-not`, Key: 'a', Body: 'a' }))).rejects.toEqual(failure('NoSuchBucket', 404))
    await expect(target.sdk.send(new CreateBucketCommand({ Bucket: 'No_Such_Name' }))).rejects.toEqual(failure('InvalidBucketName', 400))
  })

  it('keep their CORS rules', async () => {
    const { CORSRules } = await target.sdk.send(new GetBucketCorsCommand({ Bucket }))
    expect(CORSRules).toEqual([expect.objectContaining({ AllowedOrigins: ['https://site.example'], ExposeHeaders: expect.arrayContaining(['ETag']) })])
  })
})

describe('objects', () => {
  it('come back as they were put, with their headers', async () => {
    const bytes = randomBytes(300_000)
    const { ETag } = await put('plain', bytes, { ContentType: 'video/mp4', CacheControl: 'max-age=5', ContentDisposition: 'inline', Metadata: { clip: 'a b' } })
    expect(ETag).toBe(`"${md5(bytes)}"`)
    const found = await get('plain')
    expect(found.bytes.equals(bytes)).toBe(true)
    expect(found).toMatchObject({ ContentType: 'video/mp4', CacheControl: 'max-age=5', ContentDisposition: 'inline', Metadata: { clip: 'a b' }, ETag, AcceptRanges: 'bytes' })
    expect(await target.sdk.send(new HeadObjectCommand({ Bucket, Key: 'plain' }))).toMatchObject({ ContentLength: 300_000, ETag })
  })

  it('may be empty', async () => {
    await put('empty', Buffer.alloc(0))
    expect((await get('empty')).bytes.length).toBe(0)
  })

  it('are taken as a stream in aws-chunked form with a trailing checksum', async () => {
    const bytes = randomBytes(2 * MIB + 11)
    for (const ChecksumAlgorithm of ['CRC32', 'SHA256'] as const) {
      await put('streamed', Readable.from([bytes.subarray(0, 70_001), bytes.subarray(70_001)]), { ContentLength: bytes.length, ChecksumAlgorithm, ContentEncoding: 'identity' })
      const found = await get('streamed', { ChecksumMode: 'ENABLED' })
      expect(found.bytes.equals(bytes)).toBe(true)
      expect(found.ContentEncoding).toBe('identity')
    }
  })

  it('are refused when the checksum does not match, and the old one stays', async () => {
    await put('checked', 'old', { ContentType: 'text/plain' })
    await expect(put('checked', 'new', { ChecksumSHA256: createHash('sha256').update('other').digest('base64') })).rejects.toEqual(failure('BadDigest', 400))
    await expect(put('checked', 'new', { ChecksumCRC32: 'AAAAAA==' })).rejects.toEqual(failure('BadDigest', 400))
    await expect(put('checked', 'new', { ContentMD5: createHash('md5').update('other').digest('base64') })).rejects.toEqual(failure('BadDigest', 400))
    expect((await get('checked')).bytes.toString()).toBe('old')
  })

  it('take any key', async () => {
    const keys = ['../up', 'a/../../b', '/lead', 'trail/', 'a//b', './dot', 'sp ace+plus%25&?#', 'été/😀', '~!*\'()', 'x'.repeat(1024)]
    for (const key of keys) await put(key, key)
    for (const key of keys) expect((await get(key)).bytes.toString()).toBe(key)
    await expect(put('x'.repeat(1025), 'x')).rejects.toEqual(failure('KeyTooLongError', 400))
    await target.storage.remove(keys)
  })

  it('are missing with 404 and removed twice without complaint', async () => {
    await expect(get('nowhere')).rejects.toEqual(failure('NoSuchKey', 404))
    await expect(target.sdk.send(new HeadObjectCommand({ Bucket, Key: 'nowhere' }))).rejects.toEqual(failure('NotFound', 404))
    await put('gone', 'x')
    for (let turn = 0; turn < 2; turn++) await target.sdk.send(new DeleteObjectCommand({ Bucket, Key: 'gone' }))
    await expect(get('gone')).rejects.toEqual(failure('NoSuchKey', 404))
    await put('gone <&>', 'x')
    const { Deleted } = await target.sdk.send(new DeleteObjectsCommand({ Bucket, Delete: { Objects: [{ Key: 'gone <&>' }, { Key: 'never there' }] } }))
    expect(Deleted!.map(({ Key }) => Key)).toEqual(['gone <&>', 'never there'])
    await expect(get('gone <&>')).rejects.toEqual(failure('NoSuchKey', 404))
  })

  it('are copied, within conditions, and live on without the first', async () => {
    await put('copy from é', 'the same', { ContentType: 'text/plain', Metadata: { a: '1' } })
    const CopySource = `${Bucket}/${encodeURIComponent('copy from é')}`
    const { CopyObjectResult } = await target.sdk.send(new CopyObjectCommand({ Bucket, Key: 'copy', CopySource }))
    expect(CopyObjectResult!.ETag).toBe(`"${md5(Buffer.from('the same'))}"`)
    await target.sdk.send(new CopyObjectCommand({ Bucket, Key: 'copy 2', CopySource, MetadataDirective: 'REPLACE', ContentType: 'text/html' }))
    await expect(target.sdk.send(new CopyObjectCommand({ Bucket, Key: 'copy', CopySource, CopySourceIfMatch: '"x"' }))).rejects.toEqual(failure('PreconditionFailed', 412))
    await target.sdk.send(new DeleteObjectCommand({ Bucket, Key: 'copy from é' }))
    expect(await get('copy')).toMatchObject({ ContentType: 'text/plain', Metadata: { a: '1' }, bytes: Buffer.from('the same') })
    expect(await get('copy 2')).toMatchObject({ ContentType: 'text/html', Metadata: {} })
    await expect(target.sdk.send(new CopyObjectCommand({ Bucket, Key: 'copy', CopySource }))).rejects.toEqual(failure('NoSuchKey', 404))
  })

  it('obey conditions', async () => {
    const { ETag } = await put('condition', '1')
    expect((await get('condition', { IfMatch: ETag })).bytes.toString()).toBe('1')
    await expect(get('condition', { IfMatch: '"other"' })).rejects.toEqual(failure('PreconditionFailed', 412))
    await expect(get('condition', { IfNoneMatch: ETag })).rejects.toMatchObject({ $metadata: { httpStatusCode: 304 } })
    await expect(put('condition', '2', { IfNoneMatch: '*' })).rejects.toEqual(failure('PreconditionFailed', 412))
    expect((await get('condition')).bytes.toString()).toBe('1')
  })

  it('take headers for one answer', async () => {
    await put('override', 'x', { ContentType: 'text/plain' })
    expect(await get('override', { ResponseContentType: 'video/mp4', ResponseContentDisposition: 'attachment; filename="a.mp4"', ResponseCacheControl: 'no-store' }))
      .toMatchObject({ ContentType: 'video/mp4', ContentDisposition: 'attachment; filename="a.mp4"', CacheControl: 'no-store' })
  })
})

describe('ranges', () => {
  const bytes = randomBytes(1000)
  beforeAll(async () => void await put('range', bytes))

  it.each([
    ['bytes=0-0', 0, 0],
    ['bytes=0-9', 0, 9],
    ['bytes=990-', 990, 999],
    ['bytes=500-5000', 500, 999],
    ['bytes=-10', 990, 999],
    ['bytes=-5000', 0, 999],
    ['bytes=0-', 0, 999],
  ])('%s', async (Range, start, end) => {
    const found = await get('range', { Range })
    expect(found).toMatchObject({ ContentRange: `bytes ${start}-${end}/1000`, ContentLength: end - start + 1, $metadata: { httpStatusCode: 206 } })
    expect(found.bytes.equals(bytes.subarray(start, end + 1))).toBe(true)
  })

  it('cannot start past the end', async () => {
    await expect(get('range', { Range: 'bytes=1000-' })).rejects.toEqual(failure('InvalidRange', 416))
    await expect(get('empty', { Range: 'bytes=0-' })).rejects.toEqual(failure('InvalidRange', 416))
  })

  it('that make no sense give the whole', async () => {
    expect((await get('range', { Range: 'bytes=9-1' })).$metadata.httpStatusCode).toBe(200)
  })
})

describe('listings', () => {
  const names = ['l/1', 'l/2', 'l/a/1', 'l/a/2', 'l/b/1', 'l/z & <é> +', 'l/😀']
  beforeAll(async () => void await Promise.all(names.map(name => put(name, name))))

  it('go by pages and folders', async () => {
    const found: string[] = []
    for await (const page of paginateListObjectsV2({ client: target.sdk, pageSize: 2 }, { Bucket, Prefix: 'l/' })) {
      expect(page.KeyCount).toBeLessThanOrEqual(2)
      for (const { Key } of page.Contents ?? []) found.push(Key!)
    }
    expect(found).toEqual(names)
    const folders = await target.sdk.send(new ListObjectsV2Command({ Bucket, Prefix: 'l/', Delimiter: '/' }))
    expect(folders.CommonPrefixes!.map(({ Prefix }) => Prefix)).toEqual(['l/a/', 'l/b/'])
    expect(folders.Contents!.map(({ Key }) => Key)).toEqual(['l/1', 'l/2', 'l/z & <é> +', 'l/😀'])
    const late = await target.sdk.send(new ListObjectsV2Command({ Bucket, Prefix: 'l/', StartAfter: 'l/a/2' }))
    expect(late.Contents!.map(({ Key }) => Key)).toEqual(['l/b/1', 'l/z & <é> +', 'l/😀'])
    expect((await target.sdk.send(new ListObjectsV2Command({ Bucket, Prefix: 'nothing/' }))).KeyCount).toBe(0)
  })
})

describe('multipart uploads', () => {
  const [first, second] = [randomBytes(5 * MIB), randomBytes(1234)]
  const joined = Buffer.concat([first, second])

  it('join parts sent in any order, and read across them', async () => {
    const UploadId = await begin('joined')
    const tail = await sendPart('joined', UploadId, 7, second)
    await sendPart('joined', UploadId, 2, second)
    const head = await sendPart('joined', UploadId, 2, first)
    await sendPart('joined', UploadId, 9, Buffer.from('left over'))
    const listed = await target.sdk.send(new ListPartsCommand({ Bucket, Key: 'joined', UploadId, MaxParts: 2 }))
    expect(listed.Parts!.map(({ PartNumber, Size }) => [PartNumber, Size])).toEqual([[2, first.length], [7, second.length]])
    expect(listed).toMatchObject({ IsTruncated: true, NextPartNumberMarker: '7' })
    await expect(get('joined')).rejects.toEqual(failure('NoSuchKey', 404))
    const { ETag } = await complete('joined', UploadId, [head, tail])
    const md5s = Buffer.from(md5(first) + md5(second), 'hex')
    expect(ETag).toBe(`"${md5(md5s)}-2"`)
    const whole = await get('joined')
    expect(whole.bytes.equals(joined)).toBe(true)
    expect(whole).toMatchObject({ ContentType: 'video/mp4', Metadata: { made: 'here' } })
    const across = await get('joined', { Range: `bytes=${first.length - 5}-${first.length + 4}` })
    expect(across.bytes.equals(joined.subarray(first.length - 5, first.length + 5))).toBe(true)
    await expect(target.sdk.send(new ListPartsCommand({ Bucket, Key: 'joined', UploadId }))).rejects.toEqual(failure('NoSuchUpload', 404))
  })

  it('are refused with wrong, missing, unordered, small or no parts, and stay open', async () => {
    const UploadId = await begin('wrong')
    const [small, other, large] = [await sendPart('wrong', UploadId, 1, second), await sendPart('wrong', UploadId, 2, second), await sendPart('wrong', UploadId, 3, first)]
    await expect(complete('wrong', UploadId, [{ PartNumber: 3, ETag: small.ETag }])).rejects.toEqual(failure('InvalidPart', 400))
    await expect(complete('wrong', UploadId, [large, { PartNumber: 4, ETag: large.ETag }])).rejects.toEqual(failure('InvalidPart', 400))
    await expect(complete('wrong', UploadId, [large, other])).rejects.toEqual(failure('InvalidPartOrder', 400))
    await expect(complete('wrong', UploadId, [small, other])).rejects.toEqual(failure('EntityTooSmall', 400))
    await expect(complete('wrong', UploadId, [])).rejects.toEqual(failure('MalformedXML', 400))
    await expect(get('wrong')).rejects.toEqual(failure('NoSuchKey', 404))
    await complete('wrong', UploadId, [large])
    expect((await get('wrong')).bytes.equals(first)).toBe(true)
  })

  it('refuse parts out of bounds or damaged, and keys that are not theirs', async () => {
    const UploadId = await begin('bounds')
    await expect(sendPart('bounds', UploadId, 10_001, second)).rejects.toEqual(failure('InvalidArgument', 400))
    await expect(target.sdk.send(new UploadPartCommand({ Bucket, Key: 'bounds', UploadId, PartNumber: 1, Body: 'x', ContentMD5: createHash('md5').update('y').digest('base64') }))).rejects.toEqual(failure('BadDigest', 400))
    await expect(sendPart('other key', UploadId, 1, second)).rejects.toEqual(failure('NoSuchUpload', 404))
    expect((await target.sdk.send(new ListPartsCommand({ Bucket, Key: 'bounds', UploadId }))).Parts ?? []).toEqual([])
    await target.sdk.send(new AbortMultipartUploadCommand({ Bucket, Key: 'bounds', UploadId }))
  })

  it('are listed while open and leave nothing when aborted', async () => {
    const ids = [await begin('open/a'), await begin('open/a'), await begin('open/b')]
    const all = await target.sdk.send(new ListMultipartUploadsCommand({ Bucket, Prefix: 'open/' }))
    expect(all.Uploads!.map(({ Key }) => Key)).toEqual(['open/a', 'open/a', 'open/b'])
    const page = await target.sdk.send(new ListMultipartUploadsCommand({ Bucket, Prefix: 'open/', MaxUploads: 2 }))
    const rest = await target.sdk.send(new ListMultipartUploadsCommand({ Bucket, Prefix: 'open/', KeyMarker: page.NextKeyMarker, UploadIdMarker: page.NextUploadIdMarker }))
    expect([...page.Uploads!, ...rest.Uploads!].map(({ UploadId }) => UploadId).sort()).toEqual([...ids].sort())
    for (const [index, UploadId] of ids.entries()) await target.sdk.send(new AbortMultipartUploadCommand({ Bucket, Key: index < 2 ? 'open/a' : 'open/b', UploadId }))
    expect((await target.sdk.send(new ListMultipartUploadsCommand({ Bucket, Prefix: 'open/' }))).Uploads ?? []).toEqual([])
    await expect(sendPart('open/b', ids[2]!, 1, second)).rejects.toEqual(failure('NoSuchUpload', 404))
  })
})
