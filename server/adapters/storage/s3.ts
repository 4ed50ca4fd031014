import { createHash } from 'node:crypto'
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateMultipartUploadCommand, DeleteObjectCommand, GetObjectCommand,
  HeadBucketCommand, HeadObjectCommand, ListObjectsV2Command, ListPartsCommand, PutObjectCommand, S3Client, UploadPartCommand,
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { AdapterRefusal } from '../adapter-refusal'
import { contentDisposition } from './content-disposition'
import { partBytes, type SignedPart, type Storage } from './storage'

export interface S3Settings {
  /** Where this process reaches storage. */
  endpoint: string
  /** Where browsers reach it; signed addresses carry this one. */
  publicEndpoint: string
  region: string
  bucket: string
  accessKey: string
  secretKey: string
}

const putSeconds = 300
/** Parts of a large file over a thin line take longer. */
const partSeconds = 6 * 3600
const getSeconds = 60

const toBase64 = (hex: string) => Buffer.from(hex, 'hex').toString('base64')
const toHex = (base64: string) => Buffer.from(base64, 'base64').toString('hex')

/** Any S3-compatible storage; which one is known to the settings alone. */
export function s3Storage(settings: S3Settings): Storage {
  const { bucket: Bucket, region } = settings
  const client = (endpoint: string) => new S3Client({
    endpoint,
    region,
    forcePathStyle: true,
    credentials: { accessKeyId: settings.accessKey, secretAccessKey: settings.secretKey },
    // Otherwise a signed address carries the checksum of an empty body.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  })
  const inside = client(settings.endpoint)
  const outside = client(settings.publicEndpoint)

  const body = async (key: string, range?: string): Promise<Uint8Array> => {
    try {
      const got = await inside.send(new GetObjectCommand({ Bucket, Key: key, Range: range }))
      return await got.Body?.transformToByteArray() ?? new Uint8Array()
    }
    catch (thrown) {
      // An empty object has no first byte to give.
      if (statusOf(thrown) === 416) return new Uint8Array()
      throw missing(thrown)
    }
  }

  return {
    async signPut({ key, bytes, contentType, sha256 }) {
      const checksum = toBase64(sha256)
      const url = await getSignedUrl(outside, new PutObjectCommand({ Bucket, Key: key, ContentLength: bytes, ContentType: contentType, ChecksumSHA256: checksum, IfNoneMatch: '*' }), {
        expiresIn: putSeconds,
        signableHeaders: new Set(['host', 'content-length', 'content-type', 'x-amz-checksum-sha256', 'if-none-match']),
        // Left in the address, storage would not hold the body to them.
        unhoistableHeaders: new Set(['x-amz-checksum-sha256', 'if-none-match']),
      })
      // A browser sets the length itself and lets nobody else.
      return { url, headers: { 'content-type': contentType, 'x-amz-checksum-sha256': checksum, 'if-none-match': '*' } }
    },

    async startParts({ key, contentType }) {
      const made = await inside.send(new CreateMultipartUploadCommand({ Bucket, Key: key, ContentType: contentType }))
      if (!made.UploadId) throw new Error('storage gave no id for an upload in parts')
      return made.UploadId
    },

    signParts({ key, multipartId, bytes }) {
      const count = Math.ceil(bytes / partBytes)
      return Promise.all(Array.from({ length: count }, async (_, index): Promise<SignedPart> => {
        const n = index + 1
        const length = n < count ? partBytes : bytes - partBytes * (count - 1)
        const url = await getSignedUrl(outside, new UploadPartCommand({ Bucket, Key: key, UploadId: multipartId, PartNumber: n, ContentLength: length }), {
          expiresIn: partSeconds,
          signableHeaders: new Set(['host', 'content-length']),
        })
        return { n, url, headers: {} }
      }))
    },

    async partsThere({ key, multipartId }) {
      const parts: { n: number, etag: string, bytes: number }[] = []
      let marker: string | undefined
      do {
        const page = await inside.send(new ListPartsCommand({ Bucket, Key: key, UploadId: multipartId, PartNumberMarker: marker })).catch((thrown: unknown) => {
          throw missing(thrown)
        })
        for (const part of page.Parts ?? []) parts.push({ n: part.PartNumber ?? 0, etag: part.ETag ?? '', bytes: part.Size ?? 0 })
        marker = page.IsTruncated ? page.NextPartNumberMarker : undefined
      } while (marker)
      return parts
    },

    async completeParts({ key, multipartId, parts }) {
      const ordered = [...parts].sort((a, b) => a.n - b.n)
      try {
        await inside.send(new CompleteMultipartUploadCommand({
          Bucket, Key: key, UploadId: multipartId, IfNoneMatch: '*',
          MultipartUpload: { Parts: ordered.map(part => ({ PartNumber: part.n, ETag: part.etag })) },
        }))
      }
      catch (thrown) {
        const name = (thrown as Error).name
        if (['InvalidPart', 'InvalidPartOrder', 'EntityTooSmall', 'NoSuchUpload', 'MalformedXML'].includes(name)) {
          throw new AdapterRefusal('upload_incomplete', 'Storage does not have every part of the file as it was sent. Send the missing part and say complete again.')
        }
        throw thrown
      }
    },

    async abortParts({ key, multipartId }) {
      try {
        await inside.send(new AbortMultipartUploadCommand({ Bucket, Key: key, UploadId: multipartId }))
      }
      catch (thrown) {
        if (statusOf(thrown) !== 404) throw thrown
      }
    },

    async head(key) {
      try {
        const found = await inside.send(new HeadObjectCommand({ Bucket, Key: key, ChecksumMode: 'ENABLED' }))
        // A checksum of parts ends in -<count> and is not the file's own.
        const whole = found.ChecksumSHA256 && !found.ChecksumSHA256.includes('-') ? toHex(found.ChecksumSHA256) : null
        return { bytes: found.ContentLength ?? 0, contentType: found.ContentType ?? 'application/octet-stream', etag: found.ETag ?? '', sha256: whole }
      }
      catch (thrown) {
        if (statusOf(thrown) === 404) return null
        throw thrown
      }
    },

    read: key => body(key),
    readRange: (key, from, to) => body(key, `bytes=${from}-${to}`),

    async sha256Of(key) {
      const hash = createHash('sha256')
      const got = await inside.send(new GetObjectCommand({ Bucket, Key: key })).catch((thrown: unknown) => {
        throw missing(thrown)
      })
      for await (const chunk of got.Body as AsyncIterable<Uint8Array>) hash.update(chunk)
      return hash.digest('hex')
    },

    signGet({ key, contentType, filename, disposition }) {
      return getSignedUrl(outside, new GetObjectCommand({
        Bucket, Key: key, ResponseContentType: contentType, ResponseContentDisposition: contentDisposition(disposition, filename), ResponseCacheControl: 'private, max-age=60',
      }), { expiresIn: getSeconds })
    },

    async put({ key, body, contentType }) {
      const checksum = createHash('sha256').update(body).digest('base64')
      await inside.send(new PutObjectCommand({ Bucket, Key: key, Body: body, ContentLength: body.byteLength, ContentType: contentType, ChecksumSHA256: checksum }))
    },

    async remove(key) {
      await inside.send(new DeleteObjectCommand({ Bucket, Key: key }))
    },

    async list(prefix, after) {
      const page = await inside.send(new ListObjectsV2Command({ Bucket, Prefix: prefix, ContinuationToken: after }))
      return { keys: (page.Contents ?? []).map(object => object.Key ?? ''), next: page.NextContinuationToken ?? null }
    },

    async ready() {
      try {
        await inside.send(new HeadBucketCommand({ Bucket }), { abortSignal: AbortSignal.timeout(3000) })
        return true
      }
      catch {
        return false
      }
    },
  }
}

function statusOf(thrown: unknown): number | undefined {
  return (thrown as { $metadata?: { httpStatusCode?: number } }).$metadata?.httpStatusCode
}

function missing(thrown: unknown): unknown {
  return statusOf(thrown) === 404 ? new AdapterRefusal('upload_incomplete', 'Storage does not have this file.') : thrown
}
