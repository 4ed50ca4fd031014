import { createHash, createHmac, timingSafeEqual } from 'node:crypto'
import type { IncomingMessage } from 'node:http'
import { S3Error } from './s3-error'

export type Credentials = { accessKeyId: string, secretAccessKey: string }
export type Verified = {
  /** What the signer said the body's SHA-256 is, in hex; null when it left the body open. */
  payloadSha256: string | null
}

const maxSkewMs = 15 * 60_000
const maxExpirySeconds = 7 * 24 * 3600

/** RFC 3986 as the signing document wants it: everything but the unreserved characters. */
export const encode = (text: string) => encodeURIComponent(text).replace(/[!'()*]/g, character => `%${character.charCodeAt(0).toString(16).toUpperCase()}`)
const hex = (text: string) => createHash('sha256').update(text).digest('hex')
const hmac = (key: string | Buffer, text: string) => createHmac('sha256', key).update(text).digest()

/**
 * Checks AWS Signature Version 4, in the Authorization header or in the query of a presigned address.
 *
 * Source: "Signature Version 4 signing process" of the Amazon S3 API reference: the path is encoded once, `host` and every
 * `x-amz-` header sent must be signed, clocks may differ by 15 minutes, an address lives for at most 7 days.
 *
 * @throws {S3Error} with the service's own code when anything does not hold
 */
export function verifySignature(request: IncomingMessage, url: URL, credentials: Credentials, now: Date): Verified {
  const query = url.searchParams
  const presigned = query.has('X-Amz-Algorithm')
  const parts = presigned ? fromQuery(query) : fromHeader(request)
  const [accessKey, day = '', region = '', service, ending] = parts.credential.split('/')
  if (accessKey !== credentials.accessKeyId) throw new S3Error(403, 'InvalidAccessKeyId', 'The AWS Access Key Id you provided does not exist in our records.')
  if (service !== 's3' || ending !== 'aws4_request' || !parts.date.startsWith(day)) throw new S3Error(400, 'AuthorizationHeaderMalformed', 'The credential scope is not right for this request.')

  const signedAt = parseAmzDate(parts.date)
  if (presigned) {
    const expires = Number(query.get('X-Amz-Expires'))
    if (!Number.isInteger(expires) || expires < 1 || expires > maxExpirySeconds) throw new S3Error(400, 'AuthorizationQueryParametersError', 'X-Amz-Expires must be between 1 and 604800 seconds.')
    if (signedAt - now.getTime() > maxSkewMs) throw new S3Error(403, 'AccessDenied', 'Request is not yet valid')
    if (now.getTime() > signedAt + expires * 1000) throw new S3Error(403, 'AccessDenied', 'Request has expired')
  }
  else if (Math.abs(now.getTime() - signedAt) > maxSkewMs) {
    throw new S3Error(403, 'RequestTimeTooSkewed', 'The difference between the request time and the current time is too large.')
  }

  const signed = parts.signedHeaders.split(';')
  const unsigned = Object.keys(request.headers).filter(name => name.startsWith('x-amz-') && !signed.includes(name))
  if (!signed.includes('host') || unsigned.length > 0) throw new S3Error(403, 'AccessDenied', `There were headers present in the request which were not signed: ${unsigned.join(', ') || 'host'}`)

  const header = request.headers['x-amz-content-sha256']
  const payload = (typeof header === 'string' ? header : query.get('X-Amz-Content-Sha256')) ?? (presigned ? 'UNSIGNED-PAYLOAD' : null)
  if (payload === null) throw new S3Error(400, 'InvalidRequest', 'Missing required header for this request: x-amz-content-sha256')
  if (payload.startsWith('STREAMING-')) throw new S3Error(501, 'NotImplemented', 'This stand-in does not take chunked signing.')

  const canonical = [
    request.method ?? '',
    url.pathname.split('/').map(segment => encode(decodeURIComponent(segment))).join('/'),
    [...query].filter(([name]) => name !== 'X-Amz-Signature').map(([name, value]) => [encode(name), encode(value)] as const)
      .sort(([a, av], [b, bv]) => a < b ? -1 : a > b ? 1 : av < bv ? -1 : av > bv ? 1 : 0)
      .map(([name, value]) => `${name}=${value}`).join('&'),
    ...signed.map(name => `${name}:${headerText(request, name)}`),
    '',
    parts.signedHeaders,
    payload,
  ].join('\n')
  const scope = `${day}/${region}/s3/aws4_request`
  const toSign = ['AWS4-HMAC-SHA256', parts.date, scope, hex(canonical)].join('\n')
  const key = hmac(hmac(hmac(hmac(`AWS4${credentials.secretAccessKey}`, day), region), 's3'), 'aws4_request')
  const expected = hmac(key, toSign)
  const got = Buffer.from(parts.signature, 'hex')
  if (got.length !== expected.length || !timingSafeEqual(got, expected)) {
    throw new S3Error(403, 'SignatureDoesNotMatch', 'The request signature we calculated does not match the signature you provided. Check your key and signing method.')
  }
  return { payloadSha256: payload === 'UNSIGNED-PAYLOAD' ? null : payload }
}

type Parts = { credential: string, date: string, signedHeaders: string, signature: string }

function fromQuery(query: URLSearchParams): Parts {
  const need = (name: string) => {
    const value = query.get(name)
    if (!value) throw new S3Error(400, 'AuthorizationQueryParametersError', `Query-string authentication requires ${name}.`)
    return value
  }
  if (need('X-Amz-Algorithm') !== 'AWS4-HMAC-SHA256') throw new S3Error(400, 'AuthorizationQueryParametersError', 'X-Amz-Algorithm only supports AWS4-HMAC-SHA256.')
  return { credential: need('X-Amz-Credential'), date: need('X-Amz-Date'), signedHeaders: need('X-Amz-SignedHeaders'), signature: need('X-Amz-Signature') }
}

function fromHeader(request: IncomingMessage): Parts {
  const header = request.headers.authorization
  if (!header) throw new S3Error(403, 'AccessDenied', 'Access Denied')
  const [, fields = ''] = /^AWS4-HMAC-SHA256\s+(.*)$/.exec(header) ?? []
  const field = (name: string) => new RegExp(`(?:^|,)\\s*${name}=([^,\\s]+)`).exec(fields)?.[1]
  const credential = field('Credential')
  const signedHeaders = field('SignedHeaders')
  const signature = field('Signature')
  const date = request.headers['x-amz-date']
  if (!credential || !signedHeaders || !signature || typeof date !== 'string') throw new S3Error(400, 'AuthorizationHeaderMalformed', 'The authorization header that you provided is not valid.')
  return { credential, date, signedHeaders, signature }
}

/** `20260326T194000Z` as milliseconds. */
function parseAmzDate(text: string): number {
  const [, year, month, day, hour, minute, second] = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(text) ?? []
  if (!year) throw new S3Error(403, 'AccessDenied', 'AWS authentication requires a valid Date or x-amz-date header')
  return Date.UTC(Number(year), Number(month) - 1, Number(day), Number(hour), Number(minute), Number(second))
}

function headerText(request: IncomingMessage, name: string): string {
  const value = request.headers[name]
  return (Array.isArray(value) ? value.join(',') : value ?? '').trim().replace(/ +/g, ' ')
}
