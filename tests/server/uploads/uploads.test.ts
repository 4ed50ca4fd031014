import { randomBytes, randomUUID } from 'node:crypto'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { Upload } from '#server/db/entities/Upload'
import { takeUpload } from '#server/services/uploads/take-upload'
import { clearUploads } from '#server/services/uploads/clear-uploads'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { announcement, sendFile } from './send-file'

let harness: Harness
let school: TestSchool
let api: Api
let imre: Caller
let picture: Buffer

const jpeg = (shade: number) => sharp({ create: { width: 64, height: 48, channels: 3, background: { r: shade, g: shade, b: shade } } }).jpeg().toBuffer()

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  api = await serveApi(harness)
  imre = await api.as(school.imre)
  picture = await jpeg(120)
})
afterAll(async () => {
  await api.close()
  await harness.close()
})

describe('sending a file', () => {
  it('takes exactly what was announced, and says received again when asked again', async () => {
    const { id, complete } = await sendFile(imre, picture)
    expect(complete).toMatchObject({ status: 200, body: { id, state: 'received' } })
    expect(await imre.post(`/api/uploads/${id}/complete`)).toMatchObject({ status: 200, body: { state: 'received' } })
    expect((await imre.get(`/api/uploads/${id}`)).body).toEqual({ id, state: 'received' })
  })

  it('gives the same answer to the same key, and refuses the key with another body', async () => {
    const key = randomUUID()
    const first = await imre.post('/api/uploads', announcement(picture), key)
    expect((await imre.post('/api/uploads', announcement(picture), key)).body).toEqual(first.body)
    expect(await imre.post('/api/uploads', announcement(picture, { filename: 'other.jpg' }), key)).toMatchObject({ status: 409, body: { code: 'idempotency_conflict' } })
  })

  it('says what storage lacks, and takes the file after all', async () => {
    const announced = await imre.post<{ id: string, put: { url: string, headers: Record<string, string> } }>('/api/uploads', announcement(picture))
    expect(await imre.post(`/api/uploads/${announced.body.id}/complete`)).toMatchObject({ status: 422, body: { code: 'upload_incomplete' } })
    // A phone that lost the network asks for a fresh address and goes on.
    const again = await imre.get<{ state: string, put: { url: string, headers: Record<string, string> } }>(`/api/uploads/${announced.body.id}`)
    expect(again.body.state).toBe('open')
    await fetch(again.body.put.url, { method: 'PUT', headers: again.body.put.headers, body: new Uint8Array(picture) })
    expect(await imre.post(`/api/uploads/${announced.body.id}/complete`)).toMatchObject({ status: 200 })
  })

  it('sends 17 MB in parts, and goes on with the parts storage lacks', async () => {
    const big = Buffer.concat([picture, randomBytes(17 * 1024 ** 2)])
    const announced = await imre.post<{ id: string, parts: { n: number, url: string, headers: Record<string, string> }[], partBytes: number }>('/api/uploads', announcement(big))
    const { id, partBytes } = announced.body
    const send = async (part: { n: number, url: string, headers: Record<string, string> }) => {
      const answer = await fetch(part.url, { method: 'PUT', headers: part.headers, body: new Uint8Array(big.subarray((part.n - 1) * partBytes, part.n * partBytes)) })
      return { n: part.n, etag: answer.headers.get('etag') ?? '' }
    }
    await send(announced.body.parts[0]!)
    const resumed = await imre.get<{ have: { n: number, etag: string }[], parts: { n: number, url: string, headers: Record<string, string> }[] }>(`/api/uploads/${id}`)
    expect(resumed.body.have.map(part => part.n)).toEqual([1])
    const rest = await Promise.all(resumed.body.parts.filter(part => part.n > 1).map(send))
    expect(await imre.post(`/api/uploads/${id}/complete`, { parts: [...resumed.body.have, ...rest] })).toMatchObject({ status: 200, body: { state: 'received' } })
  })
})

describe('bad uploads', () => {
  it.each([
    ['a PDF named .jpg', Buffer.from('%PDF-1.7\n1 0 obj\n<<>>\nendobj\ntrailer\n'), {}],
    ['a drawing that can run script, named .jpg', Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"><script>1</script></svg>'), {}],
    ['a page named .csv', Buffer.from('<html><body>Lift,Flow</body></html>'), { purpose: 'flow-sheet', filename: 'sheet.csv', contentType: 'text/csv' }],
    ['a picture named .csv', null, { purpose: 'flow-sheet', filename: 'sheet.csv', contentType: 'text/csv' }],
  ] as const)('refuses %s and keeps nothing of it', async (_what, body, change) => {
    const { id, complete } = await sendFile(imre, body ?? picture, change)
    expect(complete).toMatchObject({ status: 422, body: { code: 'upload_wrong_type' } })
    const row = await school.em().findOneOrFail(Upload, id)
    expect(row.state).toBe('refused')
    expect(await harness.app.storage.head(row.key)).toBeNull()
  })

  it('refuses what is larger than its kind may be, before a byte is sent', async () => {
    expect(await imre.post('/api/uploads', announcement(picture, { bytes: 31 * 1024 ** 2 }))).toMatchObject({ status: 422, body: { code: 'upload_too_large' } })
    expect(await imre.post('/api/uploads', announcement(picture, { purpose: 'flow-sheet', bytes: 3 * 1024 ** 2 }))).toMatchObject({ status: 422, body: { code: 'upload_too_large' } })
  })

  it('keeps lesson media for instructors', async () => {
    expect(await imre.post('/api/uploads', announcement(picture, { purpose: 'lesson-media' }))).toMatchObject({ status: 403, body: { code: 'not_allowed' } })
    expect((await (await api.as(school.hanne)).post('/api/uploads', announcement(picture, { purpose: 'lesson-media' }))).status).toBe(201)
  })

  it('does not know another student\'s upload', async () => {
    const { id } = await sendFile(imre, picture)
    const other = await api.as(await school.person('Bettany Crake', ['student']))
    expect(await other.get(`/api/uploads/${id}`)).toMatchObject({ status: 404, body: { code: 'upload_not_found' } })
    expect(await other.post(`/api/uploads/${id}/complete`)).toMatchObject({ status: 404, body: { code: 'upload_not_found' } })
  })

  it.each([
    ['a name with a NUL', { filename: 'a\0.jpg' }],
    ['a name with half a character', { filename: '\ud800.jpg' }],
    ['a hash that is none', { sha256: 'ABC' }],
    ['no bytes', { bytes: 0 }],
    ['bytes that are no number', { bytes: Number.NaN }],
    ['a purpose of one\'s own', { purpose: 'holiday' }],
  ])('names what is wrong with %s', async (_what, change) => {
    const answer = await imre.post<{ code: string, issues: { path: string }[] }>('/api/uploads', { ...announcement(picture), ...change })
    expect(answer).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
    expect(answer.body.issues.map(issue => issue.path)).toEqual(Object.keys(change))
  })

  it('answers 404 to an id that is none', async () => {
    expect(await imre.get('/api/uploads/not-an-id')).toMatchObject({ status: 404, body: { code: 'id_invalid' } })
  })

  it('opens at most forty at once', async () => {
    const freya = await api.as(await school.person('Freya Dunmallet', ['student']))
    for (let n = 0; n < 40; n++) expect((await freya.post('/api/uploads', announcement(picture))).status).toBe(201)
    expect(await freya.post('/api/uploads', announcement(picture))).toMatchObject({ status: 429, body: { code: 'upload_too_many' } })
  })

  it('refuses more than 2 GB in a day', async () => {
    const marit = await api.as(school.marit)
    expect((await marit.post('/api/uploads', announcement(picture, { purpose: 'lesson-media', bytes: 2047 * 1024 ** 2 }))).status).toBe(201)
    expect(await marit.post('/api/uploads', announcement(picture, { bytes: 2 * 1024 ** 2 }))).toMatchObject({ status: 429, body: { code: 'upload_too_many' } })
  })
})

it('clears what nobody finished in a day and nobody used in thirty', async () => {
  const { id: unused } = await sendFile(imre, await jpeg(33))
  const { id: fresh } = await sendFile(imre, await jpeg(34))
  const { body: unfinished } = await imre.post<{ id: string }>('/api/uploads', announcement(picture))
  const ago = (days: number) => new Date(Date.now() - days * 24 * 3600_000 - 1000)
  await school.em().nativeUpdate(Upload, { id: unused }, { createdAt: ago(30) })
  await school.em().nativeUpdate(Upload, { id: unfinished.id }, { createdAt: ago(1) })
  const key = (await school.em().findOneOrFail(Upload, unused)).key
  await clearUploads(harness.app)
  expect(await school.em().count(Upload, { id: { $in: [unused, unfinished.id] } })).toBe(0)
  expect(await harness.app.storage.head(key)).toBeNull()
  expect(await school.em().count(Upload, { id: fresh })).toBe(1)
})

it('leaves a file alone that is being used at this moment, thirty days on', async () => {
  const { id } = await sendFile(imre, await jpeg(35))
  await school.em().nativeUpdate(Upload, { id }, { createdAt: new Date(Date.now() - 31 * 24 * 3600_000) })
  const { key } = await school.em().findOneOrFail(Upload, id)
  await school.em().transactional(async (tx) => {
    await takeUpload(tx, school.imre, id, 'photo', 'photo:a')
    await tx.flush()
    await clearUploads(harness.app)
  })
  expect((await school.em().findOneOrFail(Upload, id)).state).toBe('used')
  expect(await harness.app.storage.head(key)).not.toBeNull()
})
