import { randomUUID } from 'node:crypto'
import { crc32, deflateSync } from 'node:zlib'
import sharp from 'sharp'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { Photo } from '#server/db/entities/Photo'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Upload } from '#server/db/entities/Upload'
import { preparePhoto } from '#server/services/photos/prepare-photo'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { clearFor, decide, walkTo } from '../walk'
import { sendFile } from './send-file'

let harness: Harness
let school: TestSchool
let api: Api
let imre: Caller
let draft: string
let shade = 0

/** A picture nobody used before. */
const newPicture = () => {
  shade += 1
  return sharp({ create: { width: 640, height: 480, channels: 3, background: { r: shade, g: 255 - shade, b: 7 } } }).withExif({ IFD3: { GPSLatitude: '51/1 30/1 0/1', GPSLatitudeRef: 'N' } }).jpeg().toBuffer()
}
const file = async (body?: Buffer, who = imre) => (await sendFile(who, body ?? await newPicture())).id

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  api = await serveApi(harness)
  imre = await api.as(school.imre)
  await clearFor(school, school.imre)
  await walkTo(school, 70)
})
beforeEach(async () => {
  draft = (await imre.post<{ id: string }>(`/api/heads/${school.headId}/stages/70/submissions`)).body.id
})
afterAll(async () => {
  await api.close()
  await harness.close()
})

const photo = (uploadId: string, change: Record<string, unknown> = {}) => ({ uploadId, view: 'view-12', cylinder: 1, side: 'intake', ...change })

describe('a photo as evidence', () => {
  it('is taken, then shown upright in two sizes without a word of where it was', async () => {
    const uploadId = await file()
    const answer = await imre.post<{ id: string, state: string, viewName: string }>(`/api/submissions/${draft}/photos`, photo(uploadId), randomUUID())
    expect(answer).toMatchObject({ status: 201, body: { state: 'taken', viewName: 'Seat close-up', cylinder: 1, side: 'intake' } })
    await preparePhoto(harness.app, answer.body.id)
    const shown = await imre.get(`/api/photos/${answer.body.id}/image?size=preview`)
    expect(shown.status).toBe(302)
    const picture = await fetch(shown.headers.get('location') ?? '')
    expect(picture.headers.get('content-type')).toBe('image/webp')
    expect((await sharp(Buffer.from(await picture.arrayBuffer())).metadata()).exif).toBeUndefined()
    // The original stays as it came, for its student, to be saved.
    const original = await fetch((await imre.get(`/api/photos/${answer.body.id}/image?size=original`)).headers.get('location') ?? '')
    expect(original.headers.get('content-disposition')).toMatch(/^attachment/)
    expect((await sharp(Buffer.from(await original.arrayBuffer())).metadata()).exif).toBeDefined()
  })

  it('is the same photo to the same key, and one upload serves once', async () => {
    const uploadId = await file()
    const key = randomUUID()
    const first = await imre.post<{ id: string }>(`/api/submissions/${draft}/photos`, photo(uploadId), key)
    expect((await imre.post<{ id: string }>(`/api/submissions/${draft}/photos`, photo(uploadId), key)).body.id).toBe(first.body.id)
    expect(await imre.post(`/api/submissions/${draft}/photos`, photo(uploadId), randomUUID())).toMatchObject({ status: 409, body: { code: 'upload_used' } })
  })

  it('says what to do when it cannot be decoded, and then does not count', async () => {
    const whole = await sharp({ create: { width: 2000, height: 1500, channels: 3, noise: { type: 'gaussian', mean: 120, sigma: 40 }, background: '#888' } }).jpeg().toBuffer()
    const { body } = await imre.post<{ id: string }>(`/api/submissions/${draft}/photos`, photo(await file(whole.subarray(0, 3000))))
    await preparePhoto(harness.app, body.id)
    const row = await school.em().findOneOrFail(Photo, body.id)
    expect(row.state).toBe('cannot-use')
    expect(row.problem).toMatch(/\w+ .*\./)
  })

  it('is set aside without being lost', async () => {
    const { body } = await imre.post<{ id: string }>(`/api/submissions/${draft}/photos`, photo(await file()))
    expect(await imre.post(`/api/photos/${body.id}/set-aside`)).toMatchObject({ status: 200 })
    expect((await school.em().findOneOrFail(Photo, body.id)).setAsideAt).toBeInstanceOf(Date)
  })
})

/** A PNG whose header says what size it is and that holds next to nothing. */
function hugePng(width: number, height: number): Buffer {
  const chunk = (type: string, data: Buffer) => {
    const body = Buffer.concat([Buffer.from(type), data])
    const length = Buffer.alloc(4)
    length.writeUInt32BE(data.length)
    const sum = Buffer.alloc(4)
    sum.writeUInt32BE(crc32(body))
    return Buffer.concat([length, body, sum])
  }
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  header.set([1, 0, 0, 0, 0], 8)
  return Buffer.concat([Buffer.from([137, 80, 78, 71, 13, 10, 26, 10]), chunk('IHDR', header), chunk('IDAT', deflateSync(Buffer.alloc(1000))), chunk('IEND', Buffer.alloc(0))])
}

describe('bad photos', () => {
  const photosOf = (id: string) => school.em().count(Photo, { submission: id })

  it('refuses 30,000 by 30,000 pixels, leaves no half-made photo, and leaves the upload unused', async () => {
    const before = await photosOf(draft)
    const uploadId = await file(hugePng(30_000, 30_000))
    expect(await imre.post(`/api/submissions/${draft}/photos`, photo(uploadId))).toMatchObject({ status: 422, body: { code: 'picture_too_large' } })
    expect(await photosOf(draft)).toBe(before)
    expect((await school.em().findOneOrFail(Upload, uploadId)).state).toBe('received')
  })

  it('refuses the same picture again among the cohort, and does not say whose it was', async () => {
    const body = await newPicture()
    expect((await imre.post(`/api/submissions/${draft}/photos`, photo(await file(body)))).status).toBe(201)
    const bettany = await school.person(`Bettany ${randomUUID().slice(0, 4)}`, ['student'])
    await clearFor(school, bettany)
    const head = await school.anotherHead(`DNK-9${shade}`, bettany)
    await school.em().nativeUpdate(PracticeHead, { id: head }, { cohort: school.cohortId })
    await walkTo(school, 70, head)
    const hers = await api.as(bettany)
    const other = (await hers.post<{ id: string }>(`/api/heads/${head}/stages/70/submissions`)).body.id
    const answer = await hers.post(`/api/submissions/${other}/photos`, photo(await file(body, hers)))
    expect(answer).toMatchObject({ status: 409, body: { code: 'photo_seen_before' } })
    expect(JSON.stringify(answer.body)).not.toMatch(/Imre|DNK-0147/)
  })

  it.each([
    ['a cylinder the head does not have', { cylinder: 9 }, 422, 'port_not_on_head'],
    ['a side that is none', { side: 'left' }, 422, 'input_invalid'],
    ['a view nobody asks for', { view: 'view-99' }, 422, 'view_unknown'],
    ['a scale card nobody printed', { cardId: randomUUID() }, 422, 'card_not_found'],
    ['an upload of nobody\'s', { uploadId: randomUUID() }, 404, 'upload_not_found'],
    ['an upload that is no id', { uploadId: '1' }, 422, 'input_invalid'],
  ])('refuses %s', async (_what, change, status, code) => {
    const uploadId = await file()
    expect(await imre.post(`/api/submissions/${draft}/photos`, photo(uploadId, change))).toMatchObject({ status, body: { code } })
    expect((await school.em().findOneOrFail(Upload, uploadId)).state).toBe('received')
  })

  it('refuses an upload made for something else, one that never arrived, and another student\'s', async () => {
    const sheet = await sendFile(imre, Buffer.from('Lift,Flow\n1,2\n'), { purpose: 'flow-sheet', filename: 'a.csv', contentType: 'text/csv' })
    expect(await imre.post(`/api/submissions/${draft}/photos`, photo(sheet.id))).toMatchObject({ status: 422, body: { code: 'upload_wrong_purpose' } })
    const { body: open } = await imre.post<{ id: string }>('/api/uploads', { purpose: 'photo', filename: 'a.jpg', bytes: 10, contentType: 'image/jpeg', sha256: '0'.repeat(64) })
    expect(await imre.post(`/api/submissions/${draft}/photos`, photo(open.id))).toMatchObject({ status: 409, body: { code: 'upload_not_received' } })
    const other = await api.as(await school.person(`Tomek ${randomUUID().slice(0, 4)}`, ['student']))
    expect(await imre.post(`/api/submissions/${draft}/photos`, photo(await file(undefined, other)))).toMatchObject({ status: 404, body: { code: 'upload_not_found' } })
    expect(await other.post(`/api/submissions/${draft}/photos`, photo(await file(undefined, other)))).toMatchObject({ status: 404, body: { code: 'submission_not_found' } })
  })
})

describe('a document as evidence', () => {
  it('is kept with its note and only ever saved, not opened in place', async () => {
    const { id } = await sendFile(imre, Buffer.from('None found.'), { purpose: 'document', filename: 'damage list.txt', contentType: 'text/plain' })
    const answer = await imre.post<{ url: string }>(`/api/submissions/${draft}/documents`, { uploadId: id, note: 'damage list' }, randomUUID())
    expect(answer).toMatchObject({ status: 201, body: { filename: 'damage list.txt', note: 'damage list' } })
    const saved = await imre.get(answer.body.url)
    expect(saved.status).toBe(302)
    expect((await fetch(saved.headers.get('location') ?? '')).headers.get('content-disposition')).toMatch(/^attachment/)
  })
})

it('takes nothing once the submission is decided', async () => {
  await decide(school, draft, 'send-back')
  expect(await imre.post(`/api/submissions/${draft}/photos`, photo(await file()))).toMatchObject({ status: 409, body: { code: 'submission_decided' } })
})
