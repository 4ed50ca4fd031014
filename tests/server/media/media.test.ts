import { ref } from '@mikro-orm/core'
import { createHash, randomBytes, randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import { CourseModule } from '#server/db/entities/CourseModule'
import { Lesson } from '#server/db/entities/Lesson'
import { LessonPassage } from '#server/db/entities/LessonPassage'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { Upload } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { WatchPosition } from '#server/db/entities/WatchPosition'
import { hashMedia } from '#server/services/media/hash-media'
import type { MediaView } from '#shared/contract/media'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { announcement, sendFile } from '../uploads/send-file'

const film = readFileSync(new URL('../../fixtures/media/two-seconds.mp4', import.meta.url))
const webm = readFileSync(new URL('../../fixtures/media/two-seconds.webm', import.meta.url))

let harness: Harness
let school: TestSchool
let api: Api
let hanne: Caller
let imre: Caller

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  api = await serveApi(harness)
  hanne = await api.as(school.hanne)
  imre = await api.as(school.imre)
  await place(school.imre.id, { state: 'here', slot: 1 })
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

async function place(person: string, change: { state: 'here' | 'finished' | 'cancelled', slot?: number, accessUntil?: Date }): Promise<void> {
  await school.em().transactional(async (tx) => {
    const row = { cohort: tx.getReference(Cohort, school.cohortId), person: tx.getReference(User, person), slot: null, createdAt: school.now(), finishedAt: change.state === 'finished' ? school.now() : null, accessUntil: null, ...change }
    const before = await tx.findOne(BenchPlace, { person, cohort: school.cohortId })
    if (before) tx.assign(before, row)
    else tx.persist(tx.create(BenchPlace, row))
  })
}

/** Publishes a lesson that shows this picture or film; of the course of everybody's cohort unless said. */
let lessons = 40
async function publish(asset: string, code = 'porting'): Promise<string> {
  lessons += 1
  return school.em().transactional(async (tx) => {
    const course = await tx.findOne(Course, { code }) ?? tx.create(Course, { code, title: 'Porting', summary: '', createdAt: school.now() })
    if (code === 'porting') (await tx.findOneOrFail(Cohort, school.cohortId)).course = ref(course)
    const module = await tx.findOne(CourseModule, { course, number: 2 }) ?? tx.create(CourseModule, { course, number: 2, title: 'Lines and shields', outcome: '', gates: [] })
    const lesson = tx.create(Lesson, { number: lessons, slug: `lesson-${lessons}`, title: 'Dummy valves', module, ops: [50], createdAt: school.now() })
    tx.persist(tx.create(LessonVersion, { lesson, version: 1, title: 'Dummy valves', minutes: 1, document: { type: 'doc', content: [{ type: 'caution', content: [{ type: 'clip', attrs: { asset, start: 0, end: null, caption: '' } }] }] }, whatChanged: 'First', why: 'First', publishedBy: null, publishedAt: school.now() }))
    return lesson.id
  })
}

const asMedia = { purpose: 'lesson-media', filename: 'film.mp4', contentType: 'video/mp4' } as const
const add = async (body: Buffer, change: Record<string, unknown> = {}, title = 'Dummy valves') =>
  hanne.post<MediaView>('/api/media', { uploadId: (await sendFile(hanne, body, { ...asMedia, ...change })).id, title }, randomUUID())
const assetsNow = () => school.em().count(MediaAsset)

describe('a picture for lessons', () => {
  it('is drawn anew: nothing but its pixels is left, whatever stood behind them', async () => {
    const picture = await sharp({ create: { width: 2400, height: 1200, channels: 3, background: '#1f3f8f' } }).withExif({ IFD3: { GPSLatitude: '51/1 30/1 0/1', GPSLatitudeRef: 'N' } }).png().toBuffer()
    const { status, body } = await add(Buffer.concat([picture, Buffer.from('<script>alert(1)</script>')]), { filename: 'line.png', contentType: 'image/png' }, ' The line ')
    expect(status).toBe(201)
    expect(body).toMatchObject({ kind: 'image', state: 'ready', title: 'The line', contentType: 'image/webp', width: 1600, height: 800, durationSeconds: null, tracks: [], position: null })
    const shown = await hanne.get(body.fileUrl)
    expect(shown.status).toBe(302)
    const answer = await fetch(shown.headers.get('location') ?? '')
    const bytes = Buffer.from(await answer.arrayBuffer())
    expect(answer.headers.get('content-type')).toBe('image/webp')
    expect(bytes.includes('script')).toBe(false)
    expect((await sharp(bytes).metadata()).exif).toBeUndefined()
  })

  it('refuses an SVG with a script named .png, saying how to send it instead', async () => {
    const svg = Buffer.from('<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg" width="10" height="10"><script>alert(1)</script></svg>')
    const { id, complete } = await sendFile(hanne, svg, { purpose: 'lesson-media', filename: 'bowl.png', contentType: 'image/png' })
    expect(complete).toMatchObject({ status: 422, body: { code: 'upload_wrong_type' } })
    expect(complete.body.title).toMatch(/"bowl\.png" is an SVG drawing.* JPEG, PNG or WebP/)
    expect(await hanne.post('/api/media', { uploadId: id, title: 'Bowl' })).toMatchObject({ status: 409, body: { code: 'upload_not_received' } })
  })

  it('refuses a web page named .jpg', async () => {
    const page = Buffer.from('<!doctype html><html><body onload="alert(1)"></body></html>')
    const { complete } = await sendFile(hanne, page, { purpose: 'lesson-media', filename: 'bowl.jpg', contentType: 'image/jpeg' })
    expect(complete).toMatchObject({ status: 422, body: { code: 'upload_wrong_type' } })
  })

  it('refuses a picture that breaks off, keeps nothing, and leaves the upload to be used', async () => {
    const whole = await sharp({ create: { width: 900, height: 700, channels: 3, noise: { type: 'gaussian', mean: 120, sigma: 40 }, background: '#888' } }).jpeg().toBuffer()
    const before = await assetsNow()
    const { id } = await sendFile(hanne, whole.subarray(0, 3000), { purpose: 'lesson-media', filename: 'bowl.jpg', contentType: 'image/jpeg' })
    expect(await hanne.post('/api/media', { uploadId: id, title: 'Bowl' })).toMatchObject({ status: 422, body: { code: 'picture_unreadable' } })
    expect(await assetsNow()).toBe(before)
    expect((await school.em().findOneOrFail(Upload, id)).state).toBe('received')
  })
})

describe('a film for lessons', () => {
  it.each([['MP4', film, 'video/mp4'], ['WebM', webm, 'video/webm']] as const)('as %s is shown as it came, by any range', async (_name, bytes, contentType) => {
    const { id } = await sendFile(hanne, bytes, { purpose: 'lesson-media', filename: 'film', contentType })
    const { status, body } = await hanne.post<MediaView>('/api/media', { uploadId: id, title: 'Dummies', durationSeconds: 2, width: 64, height: 48 })
    expect(status).toBe(201)
    expect(body).toMatchObject({ kind: 'video', state: 'ready', contentType, bytes: bytes.length, durationSeconds: 2, width: 64, height: 48 })
    const url = (await hanne.get(body.fileUrl)).headers.get('location') ?? ''
    const part = await fetch(url, { headers: { range: 'bytes=100-199' } })
    expect(part.status).toBe(206)
    expect(part.headers.get('content-range')).toBe(`bytes 100-199/${bytes.length}`)
    expect(Buffer.from(await part.arrayBuffer()).equals(bytes.subarray(100, 200))).toBe(true)
    expect(part.headers.get('content-type')).toBe(contentType)
    expect(part.headers.get('content-disposition')).toMatch(/^attachment/)
  })

  it('refuses what is neither a picture nor a film, and what is announced as more than 2 GB', async () => {
    const { complete } = await sendFile(hanne, Buffer.from('Lift,Flow\n1,2\n'), { purpose: 'lesson-media', filename: 'film.mp4', contentType: 'video/mp4' })
    expect(complete).toMatchObject({ status: 422, body: { code: 'upload_wrong_type' } })
    const announce = (bytes: number) => hanne.post('/api/uploads', { ...announcement(film, asMedia), bytes })
    expect(await announce(2 * 1024 ** 3 + 1)).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
    // A fresh instructor: 2 GB is also what one may announce in a day.
    const ada = await api.as(await school.person(`Ada ${randomUUID().slice(0, 4)}`, ['instructor']))
    const answer = await ada.post<{ parts: { n: number }[] }>('/api/uploads', { ...announcement(film, asMedia), bytes: 2 * 1024 ** 3 })
    expect(answer.status).toBe(201)
    expect(answer.body.parts.map(part => part.n)).toEqual(Array.from({ length: 256 }, (_, index) => index + 1))
    expect(await ada.post('/api/uploads', { ...announcement(film, asMedia), bytes: 1 })).toMatchObject({ status: 429, body: { code: 'upload_too_many' } })
  })

  it('is only an instructor\'s to send', async () => {
    expect(await imre.post('/api/uploads', announcement(film, asMedia))).toMatchObject({ status: 403, body: { code: 'not_allowed' } })
  })
})

interface Part { n: number, url: string, headers: Record<string, string> }
interface Announced { id: string, parts: Part[], partBytes: number, have: { n: number, etag: string }[] }

async function sendParts(announced: Announced, body: Buffer, which: (n: number) => boolean): Promise<void> {
  for (const part of announced.parts.filter(one => which(one.n))) {
    await fetch(part.url, { method: 'PUT', headers: part.headers, body: new Uint8Array(body.subarray((part.n - 1) * announced.partBytes, part.n * announced.partBytes)) })
  }
}

describe('a film in parts', () => {
  const big = Buffer.concat([film, randomBytes(17 * 1024 ** 2)])

  it('waits until it was read whole, and is then shown', async () => {
    const { body: announced } = await hanne.post<Announced>('/api/uploads', announcement(big, asMedia))
    await sendParts(announced, big, n => n < 3)
    // The third part is missing: said plainly, and the rest can be sent.
    expect(await hanne.post(`/api/uploads/${announced.id}/complete`, { parts: [{ n: 3, etag: '"none"' }] })).toMatchObject({ status: 422, body: { code: 'upload_incomplete' } })
    const again = await hanne.get<Announced>(`/api/uploads/${announced.id}`)
    expect(again.body.have.map(part => part.n)).toEqual([1, 2])
    await sendParts(again.body, big, n => n === 3)
    expect(await hanne.post(`/api/uploads/${announced.id}/complete`)).toMatchObject({ status: 200 })

    const { body } = await hanne.post<MediaView>('/api/media', { uploadId: announced.id, title: 'Long film' })
    expect(body.state).toBe('being checked')
    expect(await hanne.get(body.fileUrl)).toMatchObject({ status: 409, body: { code: 'media_not_ready' } })
    await hashMedia(harness.app, body.id)
    expect((await hanne.get<MediaView>(`/api/media/${body.id}`)).body).toMatchObject({ state: 'ready', problem: null })
    expect((await hanne.get(body.fileUrl)).status).toBe(302)
  })

  it('is refused with the reason, and leaves storage, when another file arrived than was announced', async () => {
    const { body: announced } = await hanne.post<Announced>('/api/uploads', announcement(big, { ...asMedia, sha256: createHash('sha256').update('another').digest('hex') }))
    await sendParts(announced, big, () => true)
    expect(await hanne.post(`/api/uploads/${announced.id}/complete`)).toMatchObject({ status: 200 })
    const { body } = await hanne.post<MediaView>('/api/media', { uploadId: announced.id, title: 'Other film' })
    await hashMedia(harness.app, body.id)
    await hashMedia(harness.app, body.id)
    const after = (await hanne.get<MediaView>(`/api/media/${body.id}`)).body
    expect(after.state).toBe('refused')
    expect(after.problem).toMatch(/SHA-256 differs.*Send the film again/)
    const row = await school.em().findOneOrFail(MediaAsset, body.id, { populate: ['upload'] })
    expect(await harness.app.storage.head(row.key)).toBeNull()
    expect(row.upload?.$.state).toBe('refused')
    expect(await hanne.get(body.fileUrl)).toMatchObject({ status: 409, body: { code: 'media_not_ready' } })
  })

  it('is refused, and not tried for ever, when storage lost it', async () => {
    const { body: announced } = await hanne.post<Announced>('/api/uploads', announcement(big, asMedia))
    await sendParts(announced, big, () => true)
    await hanne.post(`/api/uploads/${announced.id}/complete`)
    const { body } = await hanne.post<MediaView>('/api/media', { uploadId: announced.id, title: 'Lost film' })
    await harness.app.storage.remove((await school.em().findOneOrFail(MediaAsset, body.id)).key)
    await hashMedia(harness.app, body.id)
    expect((await hanne.get<MediaView>(`/api/media/${body.id}`)).body).toMatchObject({ state: 'refused', problem: expect.stringMatching(/does not have/) as string })
  })
})

describe('who sees what', () => {
  it('shows a student what a published lesson shows, and nothing else', async () => {
    await publish((await add(film)).body.id)
    const { body } = await add(film)
    expect(await imre.get(`/api/media/${body.id}`)).toMatchObject({ status: 404, body: { code: 'media_not_found' } })
    await publish(body.id)
    expect((await imre.get<MediaView>(`/api/media/${body.id}`)).body).toMatchObject({ id: body.id, title: 'Dummy valves' })
    expect((await imre.get(`/api/media/${body.id}/file`)).status).toBe(302)
    expect((await (await api.as(school.silas)).get(`/api/media/${body.id}`)).status).toBe(200)
    expect(await imre.get(`/api/media/${randomUUID()}`)).toMatchObject({ status: 404, body: { code: 'media_not_found' } })
    expect(await imre.get('/api/media')).toMatchObject({ status: 403 })
  })

  it('shows a finished student films while their access runs, and nobody without a place', async () => {
    const { body } = await add(film)
    await publish(body.id)
    const freya = await school.person(`Freya ${randomUUID().slice(0, 4)}`, ['student'])
    const caller = await api.as(freya)
    const status = async () => (await caller.get(`/api/media/${body.id}/file`)).status
    expect(await caller.get(`/api/media/${body.id}/file`)).toMatchObject({ status: 403, body: { code: 'lessons_not_open' } })
    await place(freya.id, { state: 'finished', accessUntil: new Date(school.now().getTime() + 60_000) })
    expect(await status()).toBe(302)
    await place(freya.id, { state: 'finished', accessUntil: new Date(school.now().getTime() - 1000) })
    expect(await caller.get(`/api/media/${body.id}/file`)).toMatchObject({ status: 403, body: { code: 'access_ended' } })
    await place(freya.id, { state: 'cancelled' })
    expect(await status()).toBe(403)
  })

  it('keeps the films of a course from whoever is not in it', async () => {
    const { body } = await add(film)
    await publish(body.id, 'another-course')
    expect(await imre.get(`/api/media/${body.id}`)).toMatchObject({ status: 404, body: { code: 'media_not_found' } })
    expect(await imre.post(`/api/media/${body.id}/position`, { seconds: 1 })).toMatchObject({ status: 404, body: { code: 'media_not_found' } })
    expect((await hanne.get(`/api/media/${body.id}`)).status).toBe(200)
  })

  it('finds new captions of a published film at once, and no longer the old', async () => {
    const { body } = await add(film)
    const lesson = await publish(body.id)
    const say = (words: string) => hanne.post(`/api/media/${body.id}/tracks`, { kind: 'captions', vtt: `WEBVTT\n\n00:00.500 --> 00:01.000\n${words}\n` })
    const spoken = async () => (await school.em().find(LessonPassage, { lesson, kind: 'caption' })).map(one => [one.clip?.id, one.fromMs, one.body])
    await say('A lip at twelve')
    expect(await spoken()).toEqual([[body.id, 500, 'A lip at twelve']])
    await say('A lip at six')
    expect(await spoken()).toEqual([[body.id, 500, 'A lip at six']])
  })

  it('lists the newest first, a page at a time, and finds by title', async () => {
    for (const title of ['Zebra 100 %', 'Zebra one', 'Zebra two']) await add(film, {}, title)
    const first = (await hanne.get<{ items: MediaView[], next: string }>('/api/media?q=zebra&limit=2')).body
    expect(first.items.map(one => one.title)).toEqual(['Zebra two', 'Zebra one'])
    const second = (await hanne.get<{ items: MediaView[], next: string | null }>(`/api/media?q=zebra&limit=2&after=${first.next}`)).body
    expect(second).toMatchObject({ items: [{ title: 'Zebra 100 %' }], next: null })
    expect((await hanne.get<{ items: MediaView[] }>('/api/media?q=100%20%25')).body.items).toHaveLength(1)
    expect((await hanne.get<{ items: MediaView[] }>('/api/media?q=zebra&kind=image')).body.items).toHaveLength(0)
    expect(await hanne.get('/api/media?after=nonsense')).toMatchObject({ status: 422, body: { code: 'page_unknown' } })
  })
})

describe('where somebody stopped', () => {
  it('is each person\'s own, the last one said, whichever device said it', async () => {
    const { body } = await add(film)
    await publish(body.id)
    const phone = await api.as(school.imre)
    expect((await phone.post(`/api/media/${body.id}/position`, { seconds: 1.25 })).body).toEqual({ seconds: 1.25, finished: false })
    expect((await imre.get<MediaView>(`/api/media/${body.id}`)).body.position).toEqual({ seconds: 1.25, finished: false })
    expect((await hanne.get<MediaView>(`/api/media/${body.id}`)).body.position).toBeNull()
    await imre.post(`/api/media/${body.id}/position`, { seconds: 2, finished: true })
    // Seen once is seen, wherever one looks again.
    expect((await phone.post(`/api/media/${body.id}/position`, { seconds: 0.5 })).body).toEqual({ seconds: 0.5, finished: true })
  })

  it('is one row when ten devices say the first one at once', async () => {
    const { body } = await add(film)
    await publish(body.id)
    const answers = await Promise.all(Array.from({ length: 10 }, (_, index) => imre.post(`/api/media/${body.id}/position`, { seconds: index / 10 })))
    expect(answers.map(one => one.status)).toEqual(Array.from({ length: 10 }, () => 200))
    expect(await school.em().count(WatchPosition, { asset: body.id })).toBe(1)
  })

  it.each([['a spot before the beginning', '{"seconds":-1}', 422, 'input_invalid'], ['NaN', '{"seconds":NaN}', 400, 'body_not_json'], ['1e999', '{"seconds":1e999}', 422, 'input_invalid'], ['a word', '{"seconds":"two"}', 422, 'input_invalid']])('refuses %s', async (_what, body, status, code) => {
    const { body: made } = await add(film)
    await publish(made.id)
    expect(await imre.call('POST', `/api/media/${made.id}/position`, body)).toMatchObject({ status, body: { code } })
    expect(await school.em().count(WatchPosition, { asset: made.id })).toBe(0)
  })
})
