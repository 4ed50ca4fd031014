import { afterAll, beforeAll, expect, it } from 'vitest'
import type { LessonSummary, LessonView } from '#shared/contract/lessons'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { heading, makeCurriculum, words, type Curriculum } from './curriculum'

let harness: Harness
let school: TestSchool
let curriculum: Curriculum
let api: Api
let imre: Caller

const day = 24 * 3_600_000
const later = (days: number) => new Date(school.now().getTime() + days * day)

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  curriculum = await makeCurriculum(school)
  await curriculum.place(school.imre, 'here', 1)
  await curriculum.lesson(4, 'layout', 'Layout', [words('One line.'), heading('Colour'), words('Degrease twice.'), { type: 'limit', attrs: { criterion: 'W-03i' } }, { type: 'limit', attrs: { criterion: 'W-06' } }])
  api = await serveApi(harness)
  imre = await api.as(school.imre)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

it('gives a lesson with its contents and where it stands in the course', async () => {
  const { status, body } = await imre.get<LessonView>('/api/lessons/layout')
  expect(status).toBe(200)
  expect(body).toMatchObject({ number: 4, title: 'Layout', module: 'Numbers you can trust', moduleNumber: 1, ops: [40], version: 1, kept: null, progress: null, headings: [{ id: 'colour', text: 'Colour', level: 2 }] })
  expect(body.html).toContain('<h2 id="colour">Colour</h2>')
  expect((await imre.get<LessonSummary[]>('/api/lessons')).body).toMatchObject([{ slug: 'layout', version: 1, hasDraft: false }])
})

it('has no lesson of another name, and reads no other address as one', async () => {
  expect((await imre.get('/api/lessons/layouts')).body).toMatchObject({ status: 404, code: 'lesson_not_found' })
  expect((await imre.get('/api/lessons/..%2Fadmin')).body).toMatchObject({ status: 404, code: 'id_invalid' })
  expect((await imre.get('/api/lessons/layout?version=2')).body).toMatchObject({ status: 404, code: 'lesson_not_found' })
})

it('shows a limit for the casting of the reader\'s own head, in both units, with the metal that must stay', async () => {
  const { limits, html } = (await imre.get<LessonView>('/api/lessons/layout')).body
  // The Dunnock's intake throat and bowl wall, and its hard least: handbook 3 (W-03i, W-06) and 5.2.
  expect(limits['W-03i']).toMatchObject({ casting: { code: 'SL-41', name: 'Dunnock' }, bands: [{ side: 'intake', band: { lo: 87.5, hi: 90 }, words: '87.5 to 90.0 %', hard: null }] })
  // 4 / 25.4 = 0.1575; 3.5 / 25.4 = 0.1378.
  expect(limits['W-06']?.bands).toMatchObject([{ words: 'at least 4 mm (0.157 in)', hard: 'Hard least 3.5 mm (0.138 in): never under it.' }])
  expect(html).toContain('<div data-block="limit" data-criterion="W-06">')
  expect(html).toContain('at least 4 mm (0.157 in). Hard least 3.5 mm (0.138 in): never under it.')
})

it('opens to whoever is booked or here, and to a finished student while access runs; and says which it is where not', async () => {
  const asked = await school.person('Asker Nobody', ['student'])
  expect((await (await api.as(asked)).get('/api/lessons')).body).toMatchObject({ status: 403, code: 'lessons_not_open' })
  const waiting = await school.person('Waiting Person', ['student'])
  await curriculum.place(waiting, 'waiting-list', null)
  expect((await (await api.as(waiting)).get('/api/lessons/layout')).body).toMatchObject({ status: 403, code: 'lessons_not_open' })
  const booked = await school.person('Booked Person', ['student'])
  await curriculum.place(booked, 'deposit-paid', 2)
  expect((await (await api.as(booked)).get('/api/lessons/layout')).status).toBe(200)
  const freya = await school.person('Freya Dunmallet', ['student'])
  await curriculum.place(freya, 'finished', null, { accessUntil: later(1) })
  expect((await (await api.as(freya)).get('/api/lessons/layout')).status).toBe(200)
  const joss = await school.person('Joss Ivelle', ['student'])
  await curriculum.place(joss, 'finished', null, { accessUntil: later(-1) })
  expect((await (await api.as(joss)).get('/api/lessons/layout')).body).toMatchObject({ status: 403, code: 'access_ended' })
  expect((await (await api.as(school.corin)).get('/api/lessons/layout')).status).toBe(200)
})
