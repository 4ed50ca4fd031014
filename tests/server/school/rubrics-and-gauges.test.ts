import { afterAll, beforeAll, expect, it } from 'vitest'
import { Instrument } from '#server/db/entities/Instrument'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import type { Problem } from '#shared/contract/problem'
import type { CastingView, InstrumentView, RubricSummary, RubricView } from '#shared/contract/views'
import type { Rubric } from '#shared/domain/rubric/criterion'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, schoolRubric, type TestSchool } from '../review/school'

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
  await school.em().transactional(async (tx) => {
    tx.persist(tx.create(Instrument, { code: 'loupe', name: 'Loupe with reticle', quantities: ['seat-land'], expandedU: 0.08, unit: 'mm', dueOn: null, createdAt: school.now() }))
  })
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

/** The school's rubric with one criterion changed. */
function changed(id: string, change: (criterion: Rubric['stages'][number]['criteria'][number]) => void): Rubric {
  const rubric = structuredClone(schoolRubric)
  const criterion = rubric.stages.flatMap(stage => stage.criteria).find(one => one.id === id)
  if (!criterion) throw new Error(`no ${id}`)
  change(criterion)
  return rubric
}

it('lists gauges and castings for everybody who is signed in', async () => {
  expect((await imre.get<InstrumentView[]>('/api/instruments')).body).toEqual([{ code: 'loupe', name: 'Loupe with reticle', quantities: ['seat-land'], expandedU: 0.08, relative: false, unit: 'mm', due: null }])
  const castings = (await imre.get<CastingView[]>('/api/castings')).body
  // Bore of the Dunnock: handbook 5.2.
  expect(castings).toMatchObject([{ code: 'SL-41', version: 1, card: { bore: 84 } }])
  expect((await imre.get<{ bench: string }[]>('/api/benches')).body.map(one => one.bench).sort()).toEqual(['East', 'North', 'South', 'West'])
})

it('refuses a rubric in which a must has no acceptable value, names it, and keeps nothing', async () => {
  // 1.60 to 1.70 with U 0.08 at the no-return end leaves 1.68 to 1.70; with the upper end at 1.65 nothing.
  const narrow = changed('W-01', (one) => {
    one.accept = [{ scope: '*', lo: 1.6, hi: 1.65, loKind: 'no-return', hiKind: 'put-right' }]
  })
  const { status, body } = await hanne.post<Problem>('/api/rubrics', { after: 1, note: 'Narrower lands.', rubric: narrow })
  expect([status, body.code]).toEqual([422, 'must_unreachable'])
  expect(body.title).toContain('W-01')
  expect(body.issues?.map(issue => issue.path)).toEqual(['W-01'])
  expect(await school.em().count(RubricVersion)).toBe(1)
})

it.each([
  ['a band with no end', changed('W-01', one => void (one.accept = [{ scope: '*', lo: null, hi: null, loKind: 'natural', hiKind: 'natural' }])), 'accept'],
  ['a stop that is no must', changed('W-06', one => void (one.mustPass = false)), 'mustPass'],
  ['a weight of nothing', changed('W-01', one => void (one.weight = 0)), 'weight'],
  ['a criterion twice', changed('W-02', one => void (one.id = 'W-01')), 'id'],
  ['a point that needs what is not there', { ...schoolRubric, stages: schoolRubric.stages.map(one => one.code === 'W' ? { ...one, points: one.points.map(point => ({ ...point, needs: ['Z-99'] })) } : one) }, 'needs'],
  ['a wanted photo of no view', changed('W-01', one => void (one.wants = [{ kind: 'photo', view: 'view-40', per: 'port', count: 1 }])), 'view'],
  ['a title of NUL', changed('W-01', one => void (one.title = 'Land\0')), 'title'],
  ['no stages', { ...schoolRubric, stages: [] }, 'stages'],
])('refuses %s and says where', async (_what, rubric, path) => {
  const { status, body } = await hanne.post<Problem>('/api/rubrics', { after: 1, note: 'Tried.', rubric })
  expect([status, body.code]).toEqual([422, 'input_invalid'])
  expect(body.issues?.some(issue => issue.path.split('.').includes(path))).toBe(true)
  expect(await school.em().count(RubricVersion)).toBe(1)
})

it('does not take a rubric from a student', async () => {
  expect((await imre.post('/api/rubrics', { after: 1, note: 'Mine.', rubric: schoolRubric })).status).toBe(403)
})

it('saves the next version beside the one before, for one of two who began from the same', async () => {
  const wider = changed('W-02', one => void (one.weight = 4))
  const both = await Promise.all([1, 2].map(() => hanne.post<RubricView>('/api/rubrics', { after: 1, note: 'Even lands count more.', rubric: wider })))
  expect(both.map(one => one.status).sort()).toEqual([201, 409])
  expect(both.find(one => one.status === 409)?.body).toMatchObject({ code: 'rubric_stale' })
  const versions = (await imre.get<RubricSummary[]>('/api/rubrics')).body
  expect(versions.map(one => [one.version, one.savedBy])).toEqual([[2, 'Hanne Brockwell'], [1, null]])
  const weightOf = (view: RubricView) => view.rubric.stages.flatMap(stage => stage.criteria).find(one => one.id === 'W-02')?.weight
  const [first, second] = await Promise.all([1, 2].map(async version => (await imre.get<RubricView>(`/api/rubrics/${version}`)).body))
  expect(second?.rubric.version).toBe(2)
  expect([first, second].map(one => one && weightOf(one))).toEqual([schoolRubric.stages.flatMap(stage => stage.criteria).find(one => one.id === 'W-02')?.weight, 4])
  expect((await imre.get('/api/rubrics/9')).body).toMatchObject({ status: 404, code: 'rubric_not_found' })
})
