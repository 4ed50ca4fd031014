import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { Reading } from '#server/db/entities/Reading'
import { Submission } from '#server/db/entities/Submission'
import { gatherEvidence } from '#server/services/submissions/gather-evidence'
import { findSubmission } from '#server/services/submissions/find-submission'
import type { ReadingView } from '#shared/contract/views'
import { lendGauges } from '../gauges'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { clearFor, decide, walkTo } from '../walk'

let harness: Harness
let school: TestSchool
let api: Api
let imre: Caller
let draft: string

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  api = await serveApi(harness)
  await lendGauges(school.em())
  imre = await api.as(school.imre)
  await clearFor(school, school.imre)
  await walkTo(school, 70)
  draft = (await imre.post<{ id: string }>(`/api/heads/${school.headId}/stages/70/submissions`)).body.id
})
afterAll(async () => {
  await api.close()
  await harness.close()
})

const throat = (change: Record<string, unknown> = {}) => ({ quantity: 'throat-diameter', cylinder: 1, side: 'intake', at: { spot: '12-6' }, values: ['36.41'], unit: 'mm', instrument: 'split-ball', ...change })
const send = (body: unknown, key?: string) => imre.post<ReadingView & { code: string, title: string, issues: { path: string, code: string }[] }>(`/api/submissions/${draft}/readings`, body, key)
const count = () => school.em().count(Reading, { submission: draft })

describe('a reading', () => {
  it('is kept exactly as typed, with what it is in millimetres beside it', async () => {
    // 1.431 in is 1.431 x 25.4 = 36.3474 mm by definition of the inch.
    const { status, body } = await send(throat({ values: ['1,431', '1.432 '], unit: 'in' }))
    expect(status).toBe(422)
    expect(body.issues).toMatchObject([{ path: 'values.0', code: 'comma-or-thousands' }])
    const answer = await send(throat({ values: ['1.431', '1.433'], unit: 'in' }))
    expect(answer).toMatchObject({ status: 201, body: { values: ['1.431', '1.433'], unit: 'in', baseUnit: 'mm', spot: '12-6', instrument: 'Split-ball gauge and micrometer', voidedAt: null, addedBy: 'Imre Tallowin' } })
    expect(answer.body.mean).toBeCloseTo(1.432 * 25.4, 9)
    const row = await school.em().findOneOrFail(Reading, answer.body.id)
    expect(row.asTyped).toEqual(['1.431', '1.433'])
    expect(row.values[0]).toBeCloseTo(36.3474, 9)
    // Handbook 2.0: split-ball and micrometer, 0.06 mm.
    expect(row.expandedU).toBe(0.06)
  })

  it('is one reading to one key, sent twice from a pocket', async () => {
    const key = randomUUID()
    const before = await count()
    const [one, other] = await Promise.all([send(throat(), key), send(throat(), key)])
    expect(one.body.id).toBe(other.body.id)
    expect(await count()).toBe(before + 1)
    expect(await send(throat({ values: ['36.42'] }), key)).toMatchObject({ status: 409, body: { code: 'idempotency_conflict' } })
  })

  it.each([
    [{ clock: '1:30' }, '1:30'],
    [{ clock: '12:00' }, '12'],
    [{ station: 30 }, 'station 30'],
    [{ direction: '12-6', spot: 'upper' }, '12-6 upper'],
  ])('takes its spot from %j', async (at, spot) => {
    expect(await send({ quantity: 'seat-land', cylinder: 1, side: 'intake', at, values: ['1.62'], unit: 'mm', instrument: 'loupe' })).toMatchObject({ status: 201, body: { spot } })
  })

  it('takes the place of an earlier one, which is kept', async () => {
    const first = await send(throat({ at: { spot: '2-8' }, values: ['63.41'] }))
    const second = await send(throat({ at: { spot: '2-8' }, values: ['36.41'], voids: first.body.id }))
    expect(second.status).toBe(201)
    expect((await school.em().findOneOrFail(Reading, first.body.id)).voidedAt).toBeInstanceOf(Date)
    const em = school.em()
    const { evidence } = await gatherEvidence(em, await findSubmission(em, harness.app, school.imre, draft))
    const at = evidence.readings.filter(one => one.spot === '2-8')
    expect(at.map(one => one.values)).toEqual([[36.41]])
    // Once is enough.
    expect(await send(throat({ voids: first.body.id }))).toMatchObject({ status: 422, body: { code: 'reading_void_unknown' } })
  })

  it('may name its criterion instead, where that wants one thing read', async () => {
    expect(await send({ criterion: 'W-01', cylinder: 1, side: 'intake', at: { clock: '3' }, values: ['1.6'], unit: 'mm', instrument: 'loupe' })).toMatchObject({ status: 201, body: { quantity: 'seat-land' } })
    expect(await send({ criterion: 'Z-99', cylinder: 1, side: 'intake', values: ['1.6'], unit: 'mm', instrument: 'loupe' })).toMatchObject({ status: 422, body: { code: 'quantity_unknown' } })
  })

  it('has a relative instrument\'s doubt by its own size', async () => {
    // A mould slice: 2 % of the area (handbook 2.0); 5.8 cm2 is 580 mm2.
    const { status, body } = await send({ quantity: 'section-area', cylinder: 1, side: 'intake', at: { station: 30 }, values: ['5.8'], unit: 'cm2', instrument: 'mould' })
    expect(status).toBe(201)
    expect(body.mean).toBeCloseTo(580, 9)
    expect((await school.em().findOneOrFail(Reading, body.id)).expandedU).toBeCloseTo(11.6, 9)
  })

  it('was taken when the phone says, by the school\'s clock', async () => {
    const told = new Date(Date.now() - 3600_000).toISOString()
    const { body } = await send(throat({ takenAt: told }))
    expect(Math.abs(Date.parse(body.takenAt) - (school.now().getTime() - 3600_000))).toBeLessThan(5000)
    expect(await send(throat({ takenAt: new Date(Date.now() + 3600_000).toISOString() }))).toMatchObject({ status: 422, body: { code: 'taken_in_future' } })
  })

  it('may be put in by the instructor on the student\'s behalf, under their own name', async () => {
    const hanne = await api.as(school.hanne)
    expect(await hanne.post(`/api/submissions/${draft}/readings`, throat())).toMatchObject({ status: 201, body: { addedBy: 'Hanne Brockwell' } })
  })
})

describe('bad readings', () => {
  it.each([
    ['two commas', ['1,2,3'], 'too-many-separators'],
    ['no number', ['NaN'], 'not-a-number'],
    ['more than there is', ['1e999'], 'not-a-number'],
    ['a computer\'s number', ['0x1F'], 'not-a-number'],
    ['a thousand or one and a bit', ['1,234'], 'comma-or-thousands'],
    ['a word', ['about 36'], 'not-a-number'],
  ])('asks about %s, and says at which figure', async (_what, values, code) => {
    const before = await count()
    const answer = await send(throat({ values: ['36.41', ...values] }))
    expect(answer).toMatchObject({ status: 422, body: { code: 'input_invalid', issues: [{ path: 'values.1', code }] } })
    expect(await count()).toBe(before)
  })

  it('knows that 41 inches is no throat', async () => {
    const answer = await send(throat({ values: ['41'], unit: 'in' }))
    expect(answer).toMatchObject({ status: 422, body: { code: 'reading_not_plausible', issues: [{ path: 'values.0' }] } })
    expect(answer.body.title).toMatch(/unit/)
    // The same figure in millimetres is an open throat and no slip.
    expect((await send(throat({ values: ['41'] }))).status).toBe(201)
  })

  it.each<[string, Record<string, unknown>, number, string]>([
    ['no figure', { values: [] }, 422, 'input_invalid'],
    ['an empty figure', { values: [' '] }, 422, 'input_invalid'],
    ['a number in place of what was typed', { values: [36.41] }, 422, 'input_invalid'],
    ['NUL in a figure', { values: ['36\0.4'] }, 422, 'input_invalid'],
    ['half a character in its spot', { at: { spot: '12\ud800' } }, 422, 'input_invalid'],
    ['NUL in its spot', { at: { spot: '12\0' } }, 422, 'input_invalid'],
    ['a cylinder the head does not have', { cylinder: 9 }, 422, 'port_not_on_head'],
    ['a cylinder between two', { cylinder: 1.5 }, 422, 'input_invalid'],
    ['side left', { side: 'left' }, 422, 'input_invalid'],
    ['no cylinder where ports are told apart', { cylinder: null }, 422, 'port_not_on_head'],
    ['no side where ports are told apart', { side: null }, 422, 'port_not_on_head'],
    ['a gauge the school does not have', { instrument: 'ruler' }, 422, 'instrument_unknown'],
    ['a gauge for something else', { instrument: 'burette' }, 422, 'instrument_unfit'],
    ['a unit for something else', { unit: 'cc' }, 422, 'input_invalid'],
    ['a unit nobody has', { unit: '__proto__' }, 422, 'input_invalid'],
    ['a quantity nobody reads', { quantity: 'constructor' }, 422, 'quantity_unknown'],
    ['neither quantity nor criterion', { quantity: undefined }, 422, 'input_invalid'],
    ['a reading to replace that is not there', { voids: '00000000-0000-4000-8000-000000000000' }, 422, 'reading_void_unknown'],
    ['a reading to replace that is no id', { voids: 'the last' }, 422, 'input_invalid'],
    ['a field it does not have', { colour: 'blue' }, 422, 'input_invalid'],
    ['less than no metal', { values: ['-36.4'] }, 422, 'reading_not_plausible'],
  ])('refuses %s, and keeps nothing', async (_what, change, status, code) => {
    const before = await count()
    expect(await send(throat(change))).toMatchObject({ status, body: { code } })
    expect(await count()).toBe(before)
  })

  it('refuses a count that is none, and yes or no that is neither', async () => {
    const nicks = (values: string[]) => send({ quantity: 'land-nicks', cylinder: 1, side: 'intake', values, unit: 'count', instrument: 'count' })
    expect((await nicks(['2.5'])).body.issues).toMatchObject([{ code: 'not-a-count' }])
    expect((await nicks(['2'])).status).toBe(201)
    const grit = (values: string[]) => send({ quantity: 'grit', cylinder: 1, side: 'intake', values, unit: 'yes/no', instrument: 'eye' })
    expect((await grit(['maybe'])).body.issues).toMatchObject([{ code: 'not-yes-or-no' }])
    expect(await grit(['Yes'])).toMatchObject({ status: 201, body: { values: ['Yes'], mean: 1 } })
  })

  it('reads no JSON number beyond all numbers', async () => {
    const raw = JSON.stringify(throat({ at: { station: 1 } }))
    expect(await imre.call('POST', `/api/submissions/${draft}/readings`, raw.replace('"station":1', '"station":1e999'))).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
    expect(await imre.call('POST', `/api/submissions/${draft}/readings`, raw.replace('"station":1', '"station":NaN'))).toMatchObject({ status: 400, body: { code: 'body_not_json' } })
  })

  it('does not know another student\'s submission, nor one that is no id', async () => {
    const other = await api.as(await school.person('Bettany Crake', ['student']))
    expect(await other.post(`/api/submissions/${draft}/readings`, throat())).toMatchObject({ status: 404, body: { code: 'submission_not_found' } })
    expect(await imre.post('/api/submissions/1/readings', throat())).toMatchObject({ status: 404, body: { code: 'id_invalid' } })
  })
})

it('raises the version after Ask, and takes nothing once it is decided', async () => {
  await imre.post(`/api/submissions/${draft}/ask`, {})
  const asked = await school.em().findOneOrFail(Submission, draft)
  expect((await send(throat())).status).toBe(201)
  expect((await school.em().findOneOrFail(Submission, draft)).version).toBe(asked.version + 1)
  await decide(school, draft, 'send-back')
  const before = await count()
  expect(await send(throat())).toMatchObject({ status: 409, body: { code: 'submission_decided' } })
  expect(await count()).toBe(before)
})
