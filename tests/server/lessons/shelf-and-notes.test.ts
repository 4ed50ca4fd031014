import { afterAll, beforeAll, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { User } from '#server/db/entities/User'
import { WatchPosition } from '#server/db/entities/WatchPosition'
import { readPlaceToken } from '#server/services/places/place-link'
import type { Actor } from '#server/utils/actor'
import type { LessonView, NoteView, ShelfView } from '#shared/contract/lessons'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { heading, makeCurriculum, words, type Curriculum } from './curriculum'

let harness: Harness
let school: TestSchool
let curriculum: Curriculum
let api: Api
let freya: Actor
let freyas: Caller
let place: string
let film: string
let until: Date

const later = (days: number) => new Date(school.now().getTime() + days * 24 * 3_600_000)

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  curriculum = await makeCurriculum(school)
  freya = await school.person('Freya Dunmallet', ['student'])
  until = later(30)
  place = await curriculum.place(freya, 'finished', null, { accessUntil: until })
  film = await school.em().transactional(async (tx) => {
    const made = tx.create(MediaAsset, { kind: 'video', title: 'Dummy valves', name: null, upload: null, key: 'k', contentType: 'video/mp4', bytes: 1, width: 640, height: 360, durationSeconds: 30, state: 'ready', problem: null, addedBy: null, addedAt: new Date() })
    tx.persist(made)
    return made.id
  })
  await curriculum.lesson(1, 'receiving', 'Receiving', [heading('Name'), words('Stamp it.')])
  await curriculum.lesson(5, 'dummy-valves', 'Dummy valves', [heading('Fit'), { type: 'clip', attrs: { asset: film, start: 2, end: 20, caption: 'Dropped in.' } }], { module: 2 })
  api = await serveApi(harness)
  freyas = await api.as(freya)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

const shelf = async (who = freyas) => (await who.get<ShelfView>('/api/shelf')).body

it('shows a finished student the modules of their course, until when, and how far they are', async () => {
  expect((await freyas.post('/api/lessons/receiving/progress', { anchor: 'name', finished: true })).body).toEqual({ anchor: 'name', finished: true })
  const { access, modules, resume } = await shelf()
  expect(access).toMatchObject({ until: until.toISOString(), open: true })
  // The renewal opens the page of her own place.
  expect(readPlaceToken(harness.app, access.renewal?.url.split('/').at(-1) ?? '')).toMatchObject({ placeId: place })
  expect(modules.map(one => [one.number, one.title, one.lessons.map(lesson => lesson.slug), one.finished])).toEqual([[1, 'Numbers you can trust', ['receiving'], 1], [2, 'Lines and shields', ['dummy-valves'], 0]])
  expect(resume).toBeNull()
})

it('goes on where they stopped, whichever device they come back on: the heading, and the second of the film', async () => {
  await freyas.post('/api/lessons/dummy-valves/progress', { anchor: 'fit' })
  expect((await shelf()).resume).toEqual({ slug: 'dummy-valves', number: 5, title: 'Dummy valves', anchor: 'fit', clip: null })
  await school.em().transactional(async (tx) => {
    tx.persist(tx.create(WatchPosition, { person: tx.getReference(User, freya.id), asset: tx.getReference(MediaAsset, film), seconds: 7.5, finishedAt: null, updatedAt: later(1) }))
  })
  const another = await api.as(freya)
  expect((await shelf(another)).resume).toMatchObject({ slug: 'dummy-valves', anchor: 'fit', clip: { id: film, title: 'Dummy valves', seconds: 7.5 } })
  const lesson = (await another.get<LessonView>('/api/lessons/dummy-valves')).body
  expect(lesson).toMatchObject({ progress: { anchor: 'fit', finished: false }, clips: { [film]: { title: 'Dummy valves', position: { seconds: 7.5 } } } })
  expect(lesson.html).toContain(`<div id="clip-1" data-block="clip" data-asset="${film}" data-start="2" data-end="20" data-caption="Dropped in."><p><a href="/api/media/${film}/file">Film: Dropped in.</a></p></div>`)
})

it('keeps one line of progress a person and lesson, however many devices tell at once, and can take "read" back', async () => {
  await Promise.all(Array.from({ length: 6 }, () => freyas.post('/api/lessons/receiving/progress', { anchor: null, finished: true })))
  expect(await school.em().count(LessonProgress, { person: freya.id, lesson: { slug: 'receiving' } })).toBe(1)
  await freyas.post('/api/lessons/receiving/progress', { anchor: null, finished: false })
  expect((await freyas.get<LessonView>('/api/lessons/receiving')).body.progress).toEqual({ anchor: null, finished: false })
  expect((await freyas.post('/api/lessons/nowhere/progress', { anchor: null })).body).toMatchObject({ status: 404, code: 'lesson_not_found' })
})

it.each([['an address that is none', { anchor: 'a b"' }], ['a NUL', { anchor: 'a\0' }], ['no anchor at all', {}], ['more than asked for', { anchor: null, minutes: 4 }]])('refuses progress with %s', async (_what, body) => {
  expect((await freyas.post('/api/lessons/receiving/progress', body)).body).toMatchObject({ status: 422, code: 'input_invalid' })
})

it('keeps a person\'s own notes, by heading, from everybody else', async () => {
  const { status, body } = await freyas.post<NoteView>('/api/lessons/receiving/notes', { anchor: 'name', text: '  Three figures, square. ' })
  expect([status, body.text, body.anchor, body.lesson]).toEqual([201, 'Three figures, square.', 'name', { slug: 'receiving', number: 1, title: 'Receiving' }])
  expect((await freyas.get<LessonView>('/api/lessons/receiving')).body.notes).toMatchObject([{ id: body.id }])
  const hanne = await api.as(school.hanne)
  expect((await hanne.get<LessonView>('/api/lessons/receiving')).body.notes).toEqual([])
  expect((await hanne.get<NoteView[]>('/api/notes')).body).toEqual([])
  for (const call of [hanne.post(`/api/notes/${body.id}`, { text: 'Mine now.' }), hanne.call('DELETE', `/api/notes/${body.id}`)]) expect((await call).body).toMatchObject({ status: 404, code: 'note_not_found' })
  expect((await freyas.post<NoteView>(`/api/notes/${body.id}`, { anchor: null, text: 'Deeper.' })).body).toMatchObject({ text: 'Deeper.', anchor: null })
  expect((await freyas.get<NoteView[]>('/api/lessons/receiving/notes')).body.map(note => note.text)).toEqual(['Deeper.'])
  expect((await freyas.get<NoteView[]>('/api/lessons/dummy-valves/notes')).body).toEqual([])
  expect((await freyas.call('DELETE', `/api/notes/${body.id}`)).status).toBe(200)
  expect((await freyas.get<NoteView[]>('/api/notes')).body).toEqual([])
})

it.each([['nothing in it', ''], ['only spaces', '   '], ['a NUL', 'a\0b'], ['a lone surrogate', 'a\uD800b'], ['more than a note', 'a'.repeat(5001)]])('refuses a note with %s', async (_what, text) => {
  expect((await freyas.post('/api/lessons/receiving/notes', { text })).body).toMatchObject({ status: 422, code: 'input_invalid' })
  expect((await freyas.get<NoteView[]>('/api/notes')).body).toEqual([])
})

it('keeps a note once, however often it is sent under one key', async () => {
  const key = crypto.randomUUID()
  const both = await Promise.all([1, 2].map(() => freyas.post<NoteView>('/api/lessons/receiving/notes', { text: 'Once.' }, key)))
  expect(new Set(both.map(one => one.body.id)).size).toBe(1)
  expect((await freyas.get<NoteView[]>('/api/notes')).body).toHaveLength(1)
  await freyas.call('DELETE', `/api/notes/${both[0]?.body.id}`)
})

it('closes the lessons when access ends, says so, and leaves the notes and the way to open them again', async () => {
  await freyas.post('/api/lessons/receiving/notes', { text: 'For good.' })
  await school.em().nativeUpdate(BenchPlace, { id: place }, { accessUntil: later(-1) })
  try {
    const { access, modules, resume } = await shelf()
    expect([access.open, modules, resume]).toEqual([false, [], null])
    expect(access.renewal?.url).toContain('/place/')
    for (const path of ['/api/lessons', '/api/lessons/receiving', '/api/lessons/receiving/versions', '/api/search?q=stamp']) expect((await freyas.get(path)).body).toMatchObject({ status: 403, code: 'access_ended' })
    expect((await freyas.post('/api/lessons/receiving/notes', { text: 'More.' })).body).toMatchObject({ code: 'access_ended' })
    const [note] = (await freyas.get<NoteView[]>('/api/notes')).body
    expect(note?.text).toBe('For good.')
    expect((await freyas.post<NoteView>(`/api/notes/${note?.id}`, { text: 'Still mine.' })).body.text).toBe('Still mine.')
  }
  finally {
    await school.em().nativeUpdate(BenchPlace, { id: place }, { accessUntil: until })
  }
})
