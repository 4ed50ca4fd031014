import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { S3Error } from './s3-error'
import { syncFolder, writeDurably } from '../write-durably'

export type StoredMeta = {
  key: string
  /** Name of the file with the bytes. */
  blob: string
  bytes: number
  etag: string
  modified: string
  /** Base64; with `-<parts>` behind it for a checksum of checksums. Null when the sender asked for none. */
  sha256: string | null
  /** content-type, content-disposition, x-amz-meta-... as they were sent. */
  headers: Record<string, string>
}
export type Part = { n: number, blob: string, bytes: number, md5: string, sha256: string }
export type Multipart = { id: string, key: string, headers: Record<string, string>, withSha256: boolean }

/**
 * Buckets on disk. The bytes of an object are a file of their own; a small file named after the key's hash says which, and is
 * written last and whole, so a kill at any moment leaves the old object or the new one.
 */
export class ObjectStore {
  private readonly buckets = new Map<string, Map<string, StoredMeta>>()

  constructor(private readonly dir: string) {
    mkdirSync(join(dir, 'buckets'), { recursive: true })
    mkdirSync(this.blobDir, { recursive: true })
    mkdirSync(this.uploadDir, { recursive: true })
    for (const bucket of readdirSync(join(dir, 'buckets'))) {
      const objects = new Map<string, StoredMeta>()
      for (const name of readdirSync(join(dir, 'buckets', bucket))) {
        if (!name.endsWith('.json')) continue
        const meta = JSON.parse(readFileSync(join(dir, 'buckets', bucket, name), 'utf8')) as StoredMeta
        objects.set(meta.key, meta)
      }
      this.buckets.set(bucket, objects)
    }
    this.sweep()
  }

  get blobDir() {
    return join(this.dir, 'blobs')
  }

  private get uploadDir() {
    return join(this.dir, 'uploads')
  }

  /** What a killed process had begun and nothing points at. */
  private sweep() {
    const used = new Set([...this.buckets.values()].flatMap(objects => [...objects.values()].map(meta => meta.blob)))
    for (const id of readdirSync(this.uploadDir)) for (const part of this.parts(id)) used.add(part.blob)
    for (const blob of readdirSync(this.blobDir)) if (!used.has(blob)) rmSync(join(this.blobDir, blob), { force: true })
  }

  has(bucket: string) {
    return this.buckets.has(bucket)
  }

  makeBucket(bucket: string) {
    if (this.buckets.has(bucket)) throw new S3Error(409, 'BucketAlreadyOwnedByYou', 'Your previous request to create the named bucket succeeded and you already own it.')
    if (!/^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/.test(bucket)) throw new S3Error(400, 'InvalidBucketName', 'The specified bucket is not valid.')
    mkdirSync(join(this.dir, 'buckets', bucket), { recursive: true })
    this.buckets.set(bucket, new Map())
  }

  private objects(bucket: string) {
    const objects = this.buckets.get(bucket)
    if (!objects) throw new S3Error(404, 'NoSuchBucket', 'The specified bucket does not exist')
    return objects
  }

  private metaPath(bucket: string, key: string) {
    return join(this.dir, 'buckets', bucket, `${createHash('sha256').update(key).digest('hex')}.json`)
  }

  find(bucket: string, key: string): StoredMeta | undefined {
    return this.objects(bucket).get(key)
  }

  get(bucket: string, key: string): StoredMeta {
    const meta = this.find(bucket, key)
    if (!meta) throw new S3Error(404, 'NoSuchKey', 'The specified key does not exist.')
    return meta
  }

  /** Puts the object in place; `onlyNew` is If-None-Match: *. The bytes are on the disk already. */
  keep(bucket: string, meta: StoredMeta, onlyNew: boolean) {
    const objects = this.objects(bucket)
    const before = objects.get(meta.key)
    // No await between this look and the rename: two senders of one key cannot both be first.
    if (onlyNew && before) {
      this.drop(meta.blob)
      throw new S3Error(412, 'PreconditionFailed', 'At least one of the pre-conditions you specified did not hold')
    }
    syncFolder(this.blobDir)
    writeDurably(this.metaPath(bucket, meta.key), JSON.stringify(meta))
    objects.set(meta.key, meta)
    if (before && before.blob !== meta.blob) this.drop(before.blob)
  }

  drop(blob: string) {
    rmSync(join(this.blobDir, blob), { force: true })
  }

  remove(bucket: string, key: string) {
    const meta = this.objects(bucket).get(key)
    if (!meta) return
    rmSync(this.metaPath(bucket, key), { force: true })
    this.objects(bucket).delete(key)
    this.drop(meta.blob)
  }

  /** In the order of the keys' UTF-8 bytes, as the service lists them. */
  list(bucket: string, prefix: string, after: string): StoredMeta[] {
    const compare = (a: string, b: string) => Buffer.compare(Buffer.from(a), Buffer.from(b))
    return [...this.objects(bucket).values()]
      .filter(meta => meta.key.startsWith(prefix) && (after === '' || compare(meta.key, after) > 0))
      .sort((a, b) => compare(a.key, b.key))
  }

  startMultipart(upload: Multipart & { bucket: string }) {
    this.objects(upload.bucket)
    mkdirSync(join(this.uploadDir, upload.id))
    writeDurably(join(this.uploadDir, upload.id, 'upload.json'), JSON.stringify(upload))
  }

  multipart(bucket: string, key: string, id: string): Multipart {
    const file = join(this.uploadDir, id, 'upload.json')
    if (/^[\w-]+$/.test(id) && existsSync(file)) {
      const upload = JSON.parse(readFileSync(file, 'utf8')) as Multipart & { bucket: string }
      if (upload.bucket === bucket && upload.key === key) return upload
    }
    throw new S3Error(404, 'NoSuchUpload', 'The specified upload does not exist. The upload ID may be invalid, or the upload may have been aborted or completed.')
  }

  keepPart(id: string, part: Part) {
    const path = join(this.uploadDir, id, `${part.n}.part.json`)
    const before = existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')) as Part : null
    syncFolder(this.blobDir)
    writeDurably(path, JSON.stringify(part))
    if (before) this.drop(before.blob)
  }

  parts(id: string): Part[] {
    return readdirSync(join(this.uploadDir, id))
      .filter(name => name.endsWith('.part.json'))
      .map(name => JSON.parse(readFileSync(join(this.uploadDir, id, name), 'utf8')) as Part)
      .sort((a, b) => a.n - b.n)
  }

  endMultipart(id: string) {
    const parts = this.parts(id)
    rmSync(join(this.uploadDir, id), { recursive: true, force: true })
    for (const part of parts) this.drop(part.blob)
  }
}
