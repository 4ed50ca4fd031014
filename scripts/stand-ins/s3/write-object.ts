import { createHash, randomUUID } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { copyFile, open } from 'node:fs/promises'
import type { IncomingMessage } from 'node:http'
import { join } from 'node:path'
import { text } from 'node:stream/consumers'
import { XMLParser } from 'fast-xml-parser'
import type { ObjectStore } from './object-store'
import { receiveBody } from './receive-body'
import { S3Error } from './s3-error'
import type { Verified } from './verify-signature'
import { xml } from './xml'

export type Target = { bucket: string, key: string }
export type Answer = { status: number, headers?: Record<string, string>, body?: string }

const kept = /^(content-type|content-disposition|content-encoding|content-language|cache-control|expires|x-amz-meta-.+)$/
const smallestPart = 5 * 1024 ** 2

const keptHeaders = (request: IncomingMessage): Record<string, string> => ({
  'content-type': 'binary/octet-stream',
  ...Object.fromEntries(Object.entries(request.headers).filter(([name]) => kept.test(name)).map(([name, value]) => [name, String(value)])),
})

/** If-None-Match: * is the one condition on a write the service knows. */
function onlyNew(request: IncomingMessage): boolean {
  const condition = request.headers['if-none-match']
  if (condition !== undefined && condition !== '*') throw new S3Error(501, 'NotImplemented', 'A header you provided implies functionality that is not implemented: If-None-Match with a value other than *')
  return condition === '*'
}

export async function putObject(request: IncomingMessage, store: ObjectStore, { bucket, key }: Target, verified: Verified, now: Date): Promise<Answer> {
  const fresh = onlyNew(request)
  // Known before the body: a sender of 30 MB should not wait to be told.
  if (fresh && store.find(bucket, key)) throw new S3Error(412, 'PreconditionFailed', 'At least one of the pre-conditions you specified did not hold')
  const got = await receiveBody(request, store.blobDir, verified.payloadSha256)
  const asked = request.headers['x-amz-checksum-sha256'] !== undefined
  store.keep(bucket, { key, blob: got.blob, bytes: got.bytes, etag: got.md5, modified: now.toISOString(), sha256: asked ? got.sha256 : null, headers: keptHeaders(request) }, fresh)
  return { status: 200, headers: { etag: `"${got.md5}"`, ...(asked ? { 'x-amz-checksum-sha256': got.sha256 } : {}) } }
}

export async function copyObject(request: IncomingMessage, store: ObjectStore, { bucket, key }: Target, now: Date): Promise<Answer> {
  const source = decodeURIComponent(String(request.headers['x-amz-copy-source'])).replace(/^\//, '')
  const slash = source.indexOf('/')
  if (slash < 1) throw new S3Error(400, 'InvalidArgument', 'Copy Source must mention the source bucket and key: sourcebucket/sourcekey')
  const from = store.get(source.slice(0, slash), source.slice(slash + 1))
  const blob = randomUUID()
  await copyFile(join(store.blobDir, from.blob), join(store.blobDir, blob))
  const file = await open(join(store.blobDir, blob), 'r')
  await file.sync()
  await file.close()
  const replace = request.headers['x-amz-metadata-directive'] === 'REPLACE'
  store.keep(bucket, { ...from, key, blob, modified: now.toISOString(), headers: replace ? keptHeaders(request) : from.headers }, onlyNew(request))
  return { status: 200, body: xml('CopyObjectResult', { LastModified: now.toISOString(), ETag: `"${from.etag}"` }) }
}

export function startMultipart(request: IncomingMessage, store: ObjectStore, { bucket, key }: Target): Answer {
  const id = randomUUID()
  const withSha256 = request.headers['x-amz-checksum-algorithm']?.toString().toUpperCase() === 'SHA256'
  store.startMultipart({ id, bucket, key, headers: keptHeaders(request), withSha256 })
  return { status: 200, body: xml('InitiateMultipartUploadResult', { Bucket: bucket, Key: key, UploadId: id }) }
}

export async function putPart(request: IncomingMessage, store: ObjectStore, { bucket, key }: Target, query: URLSearchParams, verified: Verified): Promise<Answer> {
  const id = query.get('uploadId') ?? ''
  const n = Number(query.get('partNumber'))
  if (!Number.isInteger(n) || n < 1 || n > 10_000) throw new S3Error(400, 'InvalidArgument', 'Part number must be an integer between 1 and 10000, inclusive')
  store.multipart(bucket, key, id)
  const got = await receiveBody(request, store.blobDir, verified.payloadSha256)
  // Aborted while the bytes came in.
  try {
    store.multipart(bucket, key, id)
  }
  catch (thrown) {
    store.drop(got.blob)
    throw thrown
  }
  store.keepPart(id, { n, blob: got.blob, bytes: got.bytes, md5: got.md5, sha256: got.sha256 })
  const asked = request.headers['x-amz-checksum-sha256'] !== undefined
  return { status: 200, headers: { etag: `"${got.md5}"`, ...(asked ? { 'x-amz-checksum-sha256': got.sha256 } : {}) } }
}

export function listParts(store: ObjectStore, { bucket, key }: Target, query: URLSearchParams): Answer {
  const id = query.get('uploadId') ?? ''
  store.multipart(bucket, key, id)
  const most = Math.min(Number(query.get('max-parts') ?? 1000) || 1000, 1000)
  const after = Number(query.get('part-number-marker') ?? 0)
  const rest = store.parts(id).filter(part => part.n > after)
  const page = rest.slice(0, most)
  return {
    status: 200,
    body: xml('ListPartsResult', {
      Bucket: bucket, Key: key, UploadId: id, PartNumberMarker: after, NextPartNumberMarker: page.at(-1)?.n ?? 0, MaxParts: most, IsTruncated: rest.length > most,
      Part: page.map(part => ({ PartNumber: part.n, ETag: `"${part.md5}"`, Size: part.bytes })),
    }),
  }
}

type AskedPart = { PartNumber?: string, ETag?: string, ChecksumSHA256?: string }

export async function completeMultipart(request: IncomingMessage, store: ObjectStore, { bucket, key }: Target, query: URLSearchParams, now: Date): Promise<Answer> {
  const id = query.get('uploadId') ?? ''
  const body = await text(request)
  const upload = store.multipart(bucket, key, id)
  const parsed = new XMLParser({ isArray: name => name === 'Part', parseTagValue: false, processEntities: true }).parse(body) as { CompleteMultipartUpload?: { Part?: AskedPart[] } }
  const asked = parsed.CompleteMultipartUpload?.Part ?? []
  if (asked.length === 0) throw new S3Error(400, 'MalformedXML', 'The XML you provided was not well-formed or did not validate against our published schema')
  const there = new Map(store.parts(id).map(part => [part.n, part]))
  const parts = asked.map((one) => {
    const part = there.get(Number(one.PartNumber))
    const etag = (one.ETag ?? '').replaceAll('"', '').replaceAll('&quot;', '')
    if (!part || part.md5 !== etag || (one.ChecksumSHA256 !== undefined && one.ChecksumSHA256 !== part.sha256)) throw new S3Error(400, 'InvalidPart', 'One or more of the specified parts could not be found.')
    return part
  })
  if (parts.some((part, at) => at > 0 && part.n <= (parts[at - 1]?.n ?? 0))) throw new S3Error(400, 'InvalidPartOrder', 'The list of parts was not in ascending order.')
  if (parts.slice(0, -1).some(part => part.bytes < smallestPart)) throw new S3Error(400, 'EntityTooSmall', 'Your proposed upload is smaller than the minimum allowed size')
  const fresh = onlyNew(request)

  const blob = randomUUID()
  const file = await open(join(store.blobDir, blob), 'wx')
  for (const part of parts) for await (const chunk of createReadStream(join(store.blobDir, part.blob))) await file.writeFile(chunk as Buffer)
  await file.sync()
  await file.close()
  const md5 = createHash('md5')
  const sha256 = createHash('sha256')
  for (const part of parts) {
    md5.update(Buffer.from(part.md5, 'hex'))
    sha256.update(Buffer.from(part.sha256, 'base64'))
  }
  const etag = `${md5.digest('hex')}-${parts.length}`
  const composite = upload.withSha256 ? `${sha256.digest('base64')}-${parts.length}` : null
  store.keep(bucket, { key, blob, bytes: parts.reduce((sum, part) => sum + part.bytes, 0), etag, modified: now.toISOString(), sha256: composite, headers: upload.headers }, fresh)
  store.endMultipart(id)
  return { status: 200, body: xml('CompleteMultipartUploadResult', { Bucket: bucket, Key: key, ETag: `"${etag}"`, ChecksumSHA256: composite ?? undefined }) }
}
