import type { ObjectStore } from './object-store'
import type { Answer } from './write-object'
import { xml } from './xml'

/** ListObjectsV2 with prefix, delimiter, start-after and paging; the token is the last key given, in base64. */
export function listObjects(store: ObjectStore, bucket: string, query: URLSearchParams): Answer {
  const prefix = query.get('prefix') ?? ''
  const delimiter = query.get('delimiter') ?? ''
  const most = Math.min(Number(query.get('max-keys') ?? 1000) || 1000, 1000)
  const token = query.get('continuation-token')
  const after = token === null ? query.get('start-after') ?? '' : Buffer.from(token, 'base64url').toString()
  const contents: { Key: string, LastModified: string, ETag: string, Size: number, StorageClass: string }[] = []
  const prefixes = new Set<string>()
  let last = ''
  let truncated = false
  for (const meta of store.list(bucket, prefix, after)) {
    const cut = delimiter === '' ? -1 : meta.key.indexOf(delimiter, prefix.length)
    const common = cut < 0 ? null : meta.key.slice(0, cut + delimiter.length)
    if (common !== null && (prefixes.has(common) || after.startsWith(common))) {
      last = meta.key
      continue
    }
    if (contents.length + prefixes.size >= most) {
      truncated = true
      break
    }
    if (common !== null) prefixes.add(common)
    else contents.push({ Key: meta.key, LastModified: meta.modified, ETag: `"${meta.etag}"`, Size: meta.bytes, StorageClass: 'STANDARD' })
    last = meta.key
  }
  return {
    status: 200,
    body: xml('ListBucketResult', {
      Name: bucket, Prefix: prefix, Delimiter: delimiter || undefined, MaxKeys: most, KeyCount: contents.length + prefixes.size, IsTruncated: truncated,
      ContinuationToken: token ?? undefined, NextContinuationToken: truncated ? Buffer.from(last).toString('base64url') : undefined,
      Contents: contents, CommonPrefixes: [...prefixes].map(Prefix => ({ Prefix })),
    }),
  }
}
