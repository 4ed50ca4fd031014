import { createReadStream } from 'node:fs'
import type { IncomingMessage, ServerResponse } from 'node:http'
import { join } from 'node:path'
import { pipeline } from 'node:stream/promises'
import type { ObjectStore, StoredMeta } from './object-store'
import { parseRange } from './parse-range'
import { S3Error } from './s3-error'

const overrides = ['content-type', 'content-disposition', 'content-encoding', 'content-language', 'cache-control', 'expires']

/** GET and HEAD of an object: conditions first, then the range, then the bytes. `cut` breaks the line half-way. */
export async function readObject(request: IncomingMessage, response: ServerResponse, url: URL, store: ObjectStore, meta: StoredMeta, cut: boolean): Promise<void> {
  const headers: Record<string, string> = {
    ...meta.headers,
    'etag': `"${meta.etag}"`,
    'last-modified': new Date(meta.modified).toUTCString(),
    'accept-ranges': 'bytes',
    // A browser must take the type as it is said, whatever the bytes look like.
    'x-content-type-options': 'nosniff',
  }
  for (const name of overrides) {
    const value = url.searchParams.get(`response-${name}`)
    if (value !== null) headers[name] = value
  }
  const status = condition(request, meta)
  if (status === 412) throw new S3Error(412, 'PreconditionFailed', 'At least one of the pre-conditions you specified did not hold')
  if (status === 304) {
    response.writeHead(304, { 'etag': `"${meta.etag}"`, 'last-modified': new Date(meta.modified).toUTCString() }).end()
    return
  }
  const range = parseRange(request.headers.range, meta.bytes)
  if (request.headers['x-amz-checksum-mode']?.toString().toUpperCase() === 'ENABLED' && meta.sha256 && !range) {
    headers['x-amz-checksum-sha256'] = meta.sha256
    headers['x-amz-checksum-type'] = meta.sha256.includes('-') ? 'COMPOSITE' : 'FULL_OBJECT'
  }
  const length = range ? range.to - range.from + 1 : meta.bytes
  headers['content-length'] = String(length)
  if (range) headers['content-range'] = `bytes ${range.from}-${range.to}/${meta.bytes}`
  response.writeHead(range ? 206 : 200, headers)
  if (request.method === 'HEAD' || length === 0) {
    response.end()
    return
  }
  const start = range?.from ?? 0
  const source = createReadStream(join(store.blobDir, meta.blob), { start, end: cut ? start + Math.floor(length / 2) : start + length - 1 })
  if (!cut) return pipeline(source, response)
  await pipeline(source, response, { end: false })
  response.destroy()
}

/** RFC 9110 13.2.2: tags count before dates. */
function condition(request: IncomingMessage, meta: StoredMeta): 200 | 304 | 412 {
  const { 'if-match': match, 'if-none-match': noneMatch, 'if-modified-since': since, 'if-unmodified-since': unmodified } = request.headers
  const names = (list: string) => list.split(',').map(tag => tag.trim().replace(/^W\//, '').replaceAll('"', ''))
  const hits = (list: string) => names(list).some(tag => tag === '*' || tag === meta.etag)
  // A date header has whole seconds.
  const modified = Math.floor(Date.parse(meta.modified) / 1000) * 1000
  if (match !== undefined) {
    if (!hits(match)) return 412
  }
  else if (unmodified !== undefined && modified > Date.parse(unmodified)) return 412
  if (noneMatch !== undefined) return hits(noneMatch) ? 304 : 200
  if (since !== undefined && modified <= Date.parse(since)) return 304
  return 200
}
