import { createHash, randomBytes } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { startS3, type S3StandIn } from '../../../scripts/stand-ins/s3/start-s3'
import { contentDisposition } from '../../../server/adapters/storage/content-disposition'
import { s3Storage } from '../../../server/adapters/storage/s3'
import { partBytes, type Storage } from '../../../server/adapters/storage/storage'

const credentials = { accessKeyId: 'AKTEST', secretAccessKey: 'a-secret' }
let dir: string
let s3: S3StandIn
let storage: Storage
let shiftMs = 0

beforeAll(async () => {
  dir = mkdtempSync(join(tmpdir(), 's3-'))
  s3 = await startS3({ dir, credentials, bucket: 'evidence', origins: [], port: 0, now: () => new Date(Date.now() + shiftMs) })
  storage = s3Storage({ endpoint: s3.url, publicEndpoint: s3.url, region: 'eu-west-1', bucket: 'evidence', accessKey: 'AKTEST', secretKey: 'a-secret' })
})
afterAll(async () => {
  await s3.close()
  rmSync(dir, { recursive: true, force: true })
})

const hex = (body: Uint8Array) => createHash('sha256').update(body).digest('hex')
const file = (body: Uint8Array, key: string) => ({ key, bytes: body.length, contentType: 'image/jpeg', sha256: hex(body) })
const send = (signed: { url: string, headers: Record<string, string> }, body: Uint8Array<ArrayBuffer>) => fetch(signed.url, { method: 'PUT', body, headers: signed.headers })

it('signs an upload that holds the sender to size, type and content, and is good once', async () => {
  const body = randomBytes(3000)
  const signed = await storage.signPut(file(body, 'a'))
  expect((await send(signed, randomBytes(3000))).status).toBe(400)
  expect((await send(signed, body.subarray(1))).status).toBe(403)
  expect((await send({ ...signed, headers: { ...signed.headers, 'content-type': 'text/html' } }, body)).status).toBe(403)
  expect((await send(signed, body)).status).toBe(200)
  expect((await send(signed, body)).status).toBe(412)
  expect(await storage.head('a')).toMatchObject({ bytes: 3000, contentType: 'image/jpeg', sha256: hex(body) })
})
it('answers null for what is not there, and refuses to read it', async () => {
  expect(await storage.head('nothing')).toBeNull()
  await expect(storage.readRange('nothing', 0, 9)).rejects.toMatchObject({ code: 'upload_incomplete' })
  await expect(storage.sha256Of('nothing')).rejects.toMatchObject({ code: 'upload_incomplete' })
})
it('reads the first bytes, a whole object, and an empty one', async () => {
  await storage.put({ key: 'b', body: Buffer.from('0123456789'), contentType: 'text/csv' })
  expect(Buffer.from(await storage.readRange('b', 2, 4)).toString()).toBe('234')
  expect(Buffer.from(await storage.readRange('b', 0, 4095)).toString()).toBe('0123456789')
  expect(Buffer.from(await storage.read('b')).toString()).toBe('0123456789')
  await storage.put({ key: 'empty', body: new Uint8Array(), contentType: 'text/csv' })
  expect(await storage.readRange('empty', 0, 4095)).toHaveLength(0)
})
it('sends a large file in parts of 8 MB, goes on after a break, and can say the sum of the whole', async () => {
  const body = randomBytes(partBytes * 2 + 1000)
  const upload = { key: 'film', multipartId: await storage.startParts(file(body, 'film')), bytes: body.length }
  const parts = await storage.signParts(upload)
  expect(parts.map(part => part.n)).toEqual([1, 2, 3])
  const slice = (n: number) => body.subarray((n - 1) * partBytes, n * partBytes)
  for (const part of parts.slice(0, 2)) expect((await send(part, slice(part.n))).status).toBe(200)
  const last = parts[2]
  if (!last) throw new Error('no third part')
  expect((await send(last, slice(3).subarray(1))).status).toBe(403)
  const there = await storage.partsThere(upload)
  expect(there.map(part => part.bytes)).toEqual([partBytes, partBytes])
  await expect(storage.completeParts({ ...upload, parts: [...there, { n: 3, etag: '"none"' }] })).rejects.toMatchObject({ code: 'upload_incomplete' })

  const again = (await storage.signParts(upload))[2]
  if (!again) throw new Error('no third part')
  const sent = await send(again, slice(3))
  await storage.completeParts({ ...upload, parts: [{ n: 3, etag: sent.headers.get('etag') ?? '' }, ...there] })
  expect(await storage.head('film')).toMatchObject({ bytes: body.length, sha256: null })
  expect(await storage.sha256Of('film')).toBe(hex(body))
})
it('forgets an upload in parts, twice without complaint', async () => {
  const upload = { key: 'film2', multipartId: await storage.startParts({ ...file(new Uint8Array(1), 'film2') }) }
  await storage.abortParts(upload)
  await storage.abortParts(upload)
  await expect(storage.partsThere(upload)).rejects.toMatchObject({ code: 'upload_incomplete' })
})
it('shows an object for a minute, as the type and name given', async () => {
  await storage.put({ key: 'c', body: Buffer.from('<svg/>'), contentType: 'image/svg+xml' })
  const url = await storage.signGet({ key: 'c', contentType: 'application/octet-stream', filename: 'Jörg\'s "drawing".svg', disposition: 'attachment' })
  const got = await fetch(url)
  expect([got.status, got.headers.get('content-type'), got.headers.get('x-content-type-options')]).toEqual([200, 'application/octet-stream', 'nosniff'])
  expect(got.headers.get('content-disposition')).toMatch(/^attachment;/)
  shiftMs = 62_000
  expect((await fetch(url)).status).toBe(403)
  shiftMs = 0
})
it('lists in pages and removes what may be gone already', async () => {
  for (const n of [1, 2, 3]) await storage.put({ key: `many/${n}`, body: Buffer.from('x'), contentType: 'text/plain' })
  expect(await storage.list('many/')).toEqual({ keys: ['many/1', 'many/2', 'many/3'], next: null })
  await storage.remove('many/2')
  await storage.remove('many/2')
  expect((await storage.list('many/')).keys).toEqual(['many/1', 'many/3'])
})
it('says when storage does not answer', async () => {
  expect(await storage.ready()).toBe(true)
  const nobody = s3Storage({ endpoint: 'http://127.0.0.1:9', publicEndpoint: 'http://127.0.0.1:9', region: 'eu-west-1', bucket: 'evidence', accessKey: 'k', secretKey: 's' })
  expect(await nobody.ready()).toBe(false)
})
it('writes a file name so that old and new readers take it, and nobody can break out of it', () => {
  // RFC 8187 3.2.3: é is %C3%A9 in UTF-8.
  expect(contentDisposition('inline', 'café.jpg')).toBe('inline; filename="cafe.jpg"; filename*=UTF-8\'\'caf%C3%A9.jpg')
  expect(contentDisposition('attachment', 'a"\r\nx: y.csv')).toBe('attachment; filename="a_x: y.csv"; filename*=UTF-8\'\'a%22%0D%0Ax%3A%20y.csv')
  expect(contentDisposition('attachment', '\ud800')).toBe('attachment; filename="file"; filename*=UTF-8\'\'%EF%BF%BD')
})
