import { afterAll, beforeAll, beforeEach, expect, it } from 'vitest'
import { WitnessCall } from '#server/db/entities/PointRelease'
import { Reading } from '#server/db/entities/Reading'
import { Submission } from '#server/db/entities/Submission'
import { createClock } from '#server/adapters/clock/clock'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { clearFor, decide, read, release, walkTo } from '../walk'

let harness: Harness, api: Api, school: TestSchool, imre: Caller
let heads = 300
/** A head of Imre's walked to op 70. */
let headId: string
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  await clearFor(school, school.imre)
  imre = await api.as(school.imre)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})
beforeEach(async () => {
  headId = await headAt(70)
})

async function headAt(op: number): Promise<string> {
  heads += 1
  const id = await school.anotherHead(`DNK-0${heads}`)
  await walkTo(school, op, id)
  return id
}
const begin = (op = 70, body: unknown = {}, key?: string, head = headId) => imre.post<{ id: string, part: string, point: string | null, try: number, state: string, ports: unknown[], code?: string, title?: string }>(`/api/heads/${head}/stages/${op}/submissions`, body, key)
const jobsOf = async (id: string) => (await school.em().getConnection().execute<{ n: number }[]>('select count(*)::int as n from pgboss.job where name = ? and data ->> \'submissionId\' = ?', ['score-submission', id]))[0]?.n

it('makes the draft of the part that is due, then gives that one', async () => {
  const first = await begin()
  expect(first).toMatchObject({ status: 201, body: { part: 'first', point: 'hold-4', try: 1, state: 'draft', ports: [{ cylinder: 1, side: 'intake' }] } })
  const again = await begin()
  expect(again).toMatchObject({ status: 200, body: { id: first.body.id } })
})

it('makes one draft for two tabs that begin at once', async () => {
  const tabs = await Promise.all([api.as(school.imre), api.as(school.imre), api.as(school.hanne), api.as(school.imre), api.as(school.hanne), api.as(school.imre)])
  const both = await Promise.all(tabs.map(tab => tab.post<{ id: string }>(`/api/heads/${headId}/stages/70/submissions`)))
  expect(both.map(one => one.status).sort()).toEqual([200, 200, 200, 200, 200, 201])
  expect(new Set(both.map(one => one.body.id)).size).toBe(1)
  expect(await school.em().count(Submission, { head: headId, op: 70 })).toBe(1)
})

it('gives nobody the right to add because they may look: an office worker who also teaches elsewhere', async () => {
  const both = await school.person('Two Posts', ['instructor', 'admin'])
  const caller = await api.as(both)
  expect((await caller.get(`/api/heads/${headId}`)).status).toBe(200)
  expect(await caller.post(`/api/heads/${headId}/stages/70/submissions`)).toMatchObject({ status: 404, body: { code: 'head_not_found' } })
  const { body: { id } } = await begin()
  expect(await caller.post(`/api/submissions/${id}/ask`)).toMatchObject({ status: 404, body: { code: 'submission_not_found' } })
  await expect(read(harness, school, id, { quantity: 'seat-land', values: [1.6], by: both })).rejects.toMatchObject({ code: 'submission_not_found' })
})

it('takes the cylinder a student begins at, and refuses one the head does not have', async () => {
  expect(await begin(70, { cylinder: 9 })).toMatchObject({ status: 422, body: { code: 'port_not_on_head' } })
  expect(await begin(70, { side: 'left' })).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  expect(await school.em().count(Submission, { head: headId, op: 70 })).toBe(0)
  expect(await begin(70, { cylinder: 3 })).toMatchObject({ status: 201, body: { ports: [{ cylinder: 3, side: 'intake' }] } })
})

it('does not open a stage behind a hold, and says which', async () => {
  expect(await begin(90)).toMatchObject({ status: 409, body: { code: 'stage_not_open', title: 'Hold 4 comes first.' } })
  expect(await begin(75)).toMatchObject({ status: 404, body: { code: 'stage_not_found' } })
})

it('refuses the second bowl until Hold 4 is released, and opens it then', async () => {
  const first = await begin()
  expect(await imre.post(`/api/submissions/${first.body.id}/ask`)).toMatchObject({ status: 202, body: { state: 'asked' } })
  expect(await begin()).toMatchObject({ status: 409, body: { code: 'stage_not_open', title: 'Hold 4 is asked and not released yet.' } })
  await school.em().transactional(async tx => release(tx, await tx.findOneOrFail(Submission, first.body.id), school.hanne, school.now()))
  const rest = await begin()
  expect(rest).toMatchObject({ status: 201, body: { part: 'rest', point: null } })
  expect(rest.body.ports).toHaveLength(8)
})

it('is due again as a second try once sent back, and takes nothing more into the first', async () => {
  const first = await begin()
  await imre.post(`/api/submissions/${first.body.id}/ask`)
  await decide(school, first.body.id, 'send-back')
  expect(await begin()).toMatchObject({ status: 201, body: { part: 'first', try: 2 } })
  await expect(read(harness, school, first.body.id, { quantity: 'seat-land', values: [1.6], cylinder: 1, side: 'intake', spot: '12' })).rejects.toMatchObject({ code: 'submission_decided', status: 409 })
  expect(await school.em().count(Reading, { submission: first.body.id })).toBe(0)
})

it('refuses evidence once a stop stands, until it is lifted', async () => {
  const first = await begin()
  await imre.post(`/api/submissions/${first.body.id}/ask`)
  await decide(school, first.body.id, 'stop')
  expect(await begin()).toMatchObject({ status: 409, body: { code: 'head_stopped' } })
  const hanne = await api.as(school.hanne)
  const head = await imre.get<{ state: string, stops: { id: string, where: string }[] }>(`/api/heads/${headId}`)
  expect(head.body).toMatchObject({ state: 'stopped', stops: [{ where: 'bowl wall, cylinder 1 intake' }] })
  await hanne.post(`/api/stops/${head.body.stops[0]?.id}/lift`, { reason: 'Held pressure.' })
  expect(await begin()).toMatchObject({ status: 201, body: { try: 2 } })
})

it('asks once, however often and at however many places it is pressed', async () => {
  const { body: { id } } = await begin()
  const answers = await Promise.all([1, 2, 3].map(() => imre.post(`/api/submissions/${id}/ask`, { note: 'Ready.' })))
  const later = await imre.post(`/api/submissions/${id}/ask`, { note: 'Still ready.' })
  for (const one of [...answers, later]) expect(one).toMatchObject({ status: 202, body: { id, state: 'asked', version: 1 } })
  expect(new Set([...answers, later].map(one => one.body.askedAt)).size).toBe(1)
  expect(await jobsOf(id)).toBe(1)
  expect(await school.em().findOneOrFail(Submission, id)).toMatchObject({ note: 'Ready.' })
})

it('gives the first answer again to the same key, and refuses the key with another body', async () => {
  const { body: { id } } = await begin()
  const key = crypto.randomUUID()
  const first = await imre.post(`/api/submissions/${id}/ask`, { note: 'Ready.' }, key)
  expect(await imre.post(`/api/submissions/${id}/ask`, { note: 'Ready.' }, key)).toMatchObject({ status: 202, body: first.body })
  expect(await imre.post(`/api/submissions/${id}/ask`, { note: 'Something else.' }, key)).toMatchObject({ status: 409, body: { code: 'idempotency_conflict' } })
  expect(await imre.post(`/api/submissions/${id}/ask`, {}, 'not-a-uuid')).toMatchObject({ status: 422, body: { code: 'idempotency_key_invalid' } })
})

it('tells the person named of a witness point by asking, and waits thirty minutes', async () => {
  const head = await headAt(60)
  const { body: { id } } = await begin(60, {}, undefined, head)
  await imre.post(`/api/submissions/${id}/ask`)
  const call = await school.em().findOneOrFail(WitnessCall, { head, point: 'witness-1' })
  expect(call.waitUntil.getTime() - call.toldAt.getTime()).toBe(30 * 60_000)
  expect(await begin(60, {}, undefined, head)).toMatchObject({ status: 409, body: { code: 'stage_not_open' } })
})

it('takes no evidence after a clearance lapsed in the middle of a draft, and goes on when it is given anew', async () => {
  const { body: { id } } = await begin()
  await read(harness, school, id, { quantity: 'seat-land', values: [1.6], cylinder: 1, side: 'intake', spot: '12' })
  const { clock } = harness.app
  // The school's clock moves past the clearance's last day; sessions go on by real time.
  const real = new Date()
  harness.app.clock = createClock({ demoNow: new Date(real.getTime() + 61 * 24 * 3_600_000).toISOString(), seededAt: real.toISOString() })
  try {
    const refused = { code: 'clearance_missing', status: 409, message: 'Your clearance for the die grinder has lapsed. See the safety officer.' }
    await expect(read(harness, school, id, { quantity: 'seat-land', values: [1.7], cylinder: 1, side: 'intake', spot: '3' })).rejects.toMatchObject(refused)
    expect(await imre.post(`/api/submissions/${id}/ask`)).toMatchObject({ status: 409, body: { code: 'clearance_missing', title: refused.message } })
    await clearFor(school, school.imre, { days: 30, tools: ['die-grinder'] })
    await read(harness, school, id, { quantity: 'seat-land', values: [1.7], cylinder: 1, side: 'intake', spot: '3' })
  }
  finally {
    harness.app.clock = clock
  }
  expect(await school.em().count(Reading, { submission: id })).toBe(2)
})

it('answers what cannot be used by a code and a sentence, and keeps nothing of it', async () => {
  const { body: { id } } = await begin()
  const bad: [unknown, number, string][] = [
    [{ note: 'a\0b' }, 422, 'input_invalid'],
    [{ note: '\ud800' }, 422, 'input_invalid'],
    [{ note: 'x'.repeat(3000) }, 422, 'input_invalid'],
    [{ nota: 'x' }, 422, 'input_invalid'],
    ['{ not json', 400, 'body_not_json'],
    ['[]', 422, 'input_invalid'],
    [`{"note":"${'x'.repeat(70_000)}"}`, 413, 'body_too_large'],
  ]
  for (const [body, status, code] of bad) expect(await imre.post(`/api/submissions/${id}/ask`, body), JSON.stringify(body).slice(0, 40)).toMatchObject({ status, body: { status, code, title: expect.stringMatching(/\w+.*\./) } })
  expect(await imre.call('POST', `/api/submissions/${id}/ask`, undefined)).toMatchObject({ status: 415, body: { code: 'json_needed' } })
  expect(await imre.post('/api/submissions/7/ask')).toMatchObject({ status: 404, body: { code: 'id_invalid' } })
  expect(await imre.post(`/api/submissions/${crypto.randomUUID()}/ask`)).toMatchObject({ status: 404, body: { code: 'submission_not_found' } })
  expect(await imre.call('PATCH', `/api/submissions/${id}/ask`, {})).toMatchObject({ status: 405, body: { code: 'method_not_allowed' } })
  expect(await imre.call('POST', `/api/submissions/${id}/ask`, {}, { origin: 'https://elsewhere.example' })).toMatchObject({ status: 403, body: { code: 'foreign_origin' } })
  expect(await school.em().findOneOrFail(Submission, id)).toMatchObject({ state: 'draft', note: '' })
  expect(await jobsOf(id)).toBe(0)
})
