import type { IncomingMessage, ServerResponse } from 'node:http'
import { S3Error } from './s3-error'

const methods = ['GET', 'HEAD', 'PUT']
const headers = /^(content-type|content-length|content-md5|range|if-none-match|if-match|x-amz-[\w-]+)$/

/**
 * The bucket's CORS rule: the application's own origins may read and write with what a signed request carries, and see the tag of what they sent.
 *
 * @returns true when the request was a preflight and is answered
 * @throws {S3Error} for a preflight that is not allowed
 */
export function answerCors(request: IncomingMessage, response: ServerResponse, origins: readonly string[]): boolean {
  const origin = request.headers.origin
  const preflight = request.method === 'OPTIONS'
  if (origin && origins.includes(origin)) {
    response.setHeader('access-control-allow-origin', origin)
    response.setHeader('access-control-expose-headers', 'ETag, x-amz-checksum-sha256, x-amz-request-id, Content-Range, Accept-Ranges, Content-Length')
    response.setHeader('vary', 'Origin, Access-Control-Request-Headers, Access-Control-Request-Method')
  }
  if (!preflight) return false
  const asked = (request.headers['access-control-request-headers'] ?? '').split(',').map(name => name.trim().toLowerCase()).filter(Boolean)
  const allowed = origin && origins.includes(origin) && methods.includes(request.headers['access-control-request-method'] ?? '') && asked.every(name => headers.test(name))
  if (!allowed) throw new S3Error(403, 'AccessForbidden', 'CORSResponse: This CORS request is not allowed.')
  response.writeHead(200, {
    'access-control-allow-methods': methods.join(', '),
    ...(asked.length > 0 ? { 'access-control-allow-headers': asked.join(', ') } : {}),
    'access-control-max-age': '600',
    'content-length': '0',
  }).end()
  return true
}
