import { S3Error } from './s3-error'

/**
 * The bytes a Range header asks for, both ends included; null for the whole object.
 * More than one range, or another unit, is ignored, as RFC 9110 14.2 allows.
 *
 * @throws {S3Error} InvalidRange when none of it is inside
 */
export function parseRange(header: string | undefined, bytes: number): { from: number, to: number } | null {
  const [, first, last] = /^bytes=(\d*)-(\d*)$/.exec(header ?? '') ?? []
  if (first === undefined || last === undefined || (first === '' && last === '')) return null
  const from = first === '' ? Math.max(0, bytes - Number(last)) : Number(first)
  const to = first === '' || last === '' ? bytes - 1 : Math.min(Number(last), bytes - 1)
  if (first !== '' && last !== '' && Number(last) < from) return null
  if (from >= bytes || (first === '' && Number(last) === 0)) {
    throw new S3Error(416, 'InvalidRange', 'The requested range is not satisfiable', { 'content-range': `bytes */${bytes}` })
  }
  return { from, to }
}
