import { afterAll, beforeAll, expect, it } from 'vitest'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { Reading } from '#server/db/entities/Reading'
import { Submission } from '#server/db/entities/Submission'
import { scoreSubmission } from '#server/services/submissions/score-submission'
import type { BenchView, HeadSummary, HeadView, Page, SpotView } from '#shared/contract/views'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { clearFor, decide, read, release, sign, walkTo } from '../walk'

let harness: Harness, api: Api, school: TestSchool, imre: Caller, hanne: Caller
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  await clearFor(school, school.imre)
  imre = await api.as(school.imre)
  hanne = await api.as(school.hanne)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

/** A student of their own with a head walked to `op`, so that no test sees another's. */
let count = 600
async function student(op: number) {
  count += 1
  const person = await school.person(`Student${count} Somebody`, ['student'])
  await clearFor(school, person)
  const head = await school.anotherHead(`DNK-0${count}`, person)
  await walkTo(school, op, head)
  return { person, head, as: await api.as(person) }
}
const bench = async (who: Caller) => (await who.get<BenchView>('/api/bench')).body
async function begin(who: Caller, head: string, op: number): Promise<string> {
  const answer = await who.post<{ id: string }>(`/api/heads/${head}/stages/${op}/submissions`)
  if (answer.status > 201) throw new Error(JSON.stringify(answer.body))
  return answer.body.id
}

it('lists a student\'s own heads, and an instructor\'s by the cohorts taught today', async () => {
  const { head, as } = await student(20)
  const own = await as.get<Page<HeadSummary>>('/api/heads')
  expect(own.body.items.map(one => one.id)).toEqual([head])
  expect((await hanne.get<Page<HeadSummary>>('/api/heads?limit=100')).body.items.map(one => one.id)).toContain(head)
  expect((await (await api.as(school.stranger)).get<Page<HeadSummary>>('/api/heads')).body.items).toEqual([])

  // A link that has run out teaches nothing any more.
  const was = await school.person('Former Teacher', ['instructor'])
  await school.em().transactional(async (tx) => {
    tx.persist(tx.create(CohortStaff, { cohort: school.cohortId, person: was.id, points: [], posts: [], from: new Date(0), until: new Date(school.now().getTime() - 1000), givenBy: null } as never))
  })
  const former = await api.as(was)
  expect((await former.get<Page<HeadSummary>>('/api/heads')).body.items).toEqual([])
  expect(await former.get(`/api/heads/${head}`)).toMatchObject({ status: 404, body: { code: 'head_not_found' } })
})

it('pages heads by number', async () => {
  const first = await hanne.get<Page<HeadSummary>>('/api/heads?limit=1')
  const second = await hanne.get<Page<HeadSummary>>(`/api/heads?limit=1&after=${first.body.next}`)
  expect(first.body.items).toHaveLength(1)
  expect(second.body.items[0]?.number).not.toBe(first.body.items[0]?.number)
  expect(await hanne.get('/api/heads?after=%2F%2F')).toMatchObject({ status: 422, body: { code: 'page_unknown' } })
  expect(await hanne.get('/api/heads?limit=1000')).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
})

it('tells every stage and point of the route by name, with who released it and when', async () => {
  const { head, as } = await student(70)
  const { body } = await as.get<HeadView>(`/api/heads/${head}`)
  expect(body).toMatchObject({ state: 'working', casting: { code: 'SL-41', cylinders: 4 }, stageNow: { op: 70 }, rubricVersion: 1 })
  expect(body.stages).toHaveLength(19)
  expect(body.stages.find(one => one.op === 50)).toMatchObject({ code: 'S', state: 'done', points: [{ code: 'hold-3', name: 'Hold 3', kind: 'hold', when: 'after', state: 'released', by: 'Hanne Brockwell' }] })
  const id = await begin(as, head, 70)
  await as.post(`/api/submissions/${id}/ask`)
  expect((await as.get<HeadView>(`/api/heads/${head}`)).body).toMatchObject({ state: 'held', stageNow: { op: 70 } })
  await school.em().transactional(async tx => release(tx, await tx.findOneOrFail(Submission, id), school.hanne, school.now(), { condition: 'no more at 8 o\'clock' }))
  const after = (await as.get<HeadView>(`/api/heads/${head}`)).body.stages.find(one => one.op === 70)
  expect(after).toMatchObject({ state: 'open', points: [{ state: 'released with a condition', conditions: ['no more at 8 o\'clock'] }] })
})

it('shows the newest reading at each spot with the doubt of gauge and repeats, the older ones behind it, none that was voided', async () => {
  const { person, head, as } = await student(70)
  const id = await begin(as, head, 70)
  const at = { quantity: 'seat-land', cylinder: 1, side: 'intake' as const, by: person }
  await read(harness, school, id, { ...at, spot: '12', values: [1.9] })
  await read(harness, school, id, { ...at, spot: '12', values: [1.6, 1.64] })
  const voided = await read(harness, school, id, { ...at, spot: '3', values: [9] })
  await school.em().nativeUpdate(Reading, { id: voided }, { voidedAt: school.now() })
  const { body } = await as.get<SpotView[]>(`/api/heads/${head}/spots`)
  expect(body).toHaveLength(1)
  expect(body[0]).toMatchObject({ quantity: 'seat-land', spot: '12', op: 70, asTyped: ['1.6', '1.64'], older: [{ value: 1.9 }] })
  expect(body[0]?.value).toBeCloseTo(1.62, 12)
  // By hand: u of the gauge 0.04; scatter s = 0.04/sqrt(2), over sqrt(2) is 0.02; together sqrt(0.002), twice that.
  expect(body[0]?.expandedUncertainty).toBeCloseTo(2 * Math.sqrt(0.002), 12)
})

it('offers the next stroke with its caution, and begins nothing behind a hold', async () => {
  const { person, head, as } = await student(70)
  const open = await bench(as)
  expect(open.next).toMatchObject({ op: 70, offersStroke: true, why: null, submission: null, stroke: expect.stringContaining('One port') })
  // Handbook 7: the short caution is never left out where a stroke is offered.
  expect(open.caution[0]).toBe('Eyes, ears, extraction on. Let the bur stop before you measure. Local law and the safety officer\'s word come first.')
  expect(open.caution.join(' ')).toContain('started with its head inside the port')
  expect(open.wanted.some(want => want.quantity === 'seat-land' && want.have === 0)).toBe(true)
  const id = await begin(as, head, 70)
  await read(harness, school, id, { quantity: 'seat-land', cylinder: 1, side: 'intake', spot: '12', values: [1.6], by: person })
  expect((await bench(as)).wanted.find(want => want.quantity === 'seat-land' && want.spot === '12')).toMatchObject({ have: 1 })

  await as.post(`/api/submissions/${id}/ask`)
  expect(await bench(as)).toMatchObject({ next: { op: 70, offersStroke: false, why: 'Hold 4 is asked and not released yet.' }, waiting: [{ title: 'Hold 4', state: 'asked', to: `/proof/${id}` }], wanted: [] })

  await decide(school, id, 'send-back')
  expect(await bench(as)).toMatchObject({ next: { offersStroke: true, why: 'Sent back: add only what was asked for.' }, waiting: [{ title: 'Hold 4', state: 'sent back' }], fromInstructor: { by: 'Hanne Brockwell', text: 'Take it again at 12.', submissionId: id } })
})

it('offers no stroke to somebody who has not signed the safety form, or whose clearance is missing', async () => {
  const person = await school.person('Uncleared Somebody', ['student'])
  const head = await school.anotherHead('DNK-0998', person)
  await walkTo(school, 70, head)
  const caller = await api.as(person)
  expect(await bench(caller)).toMatchObject({ consent: 'none', next: { op: 70, offersStroke: false, why: 'Sign the safety form first.' }, metalLeft: [], wanted: [] })
  await sign(school, person)
  const shown = await bench(caller)
  expect(shown).toMatchObject({ consent: 'signed', next: { op: 70, offersStroke: false, why: expect.stringContaining('not cleared for the die grinder') }, metalLeft: [], wanted: [] })
})

it('says how much metal is left from the map of the baseline on, and never without where to stop', async () => {
  const { person, head, as } = await student(30)
  const map = await begin(as, head, 30)
  await read(harness, school, map, { quantity: 'wall-thickness', cylinder: 1, side: 'intake', spot: 'pushrod fore, station 30, height 0', values: [4.4], u: 0.15, by: person })
  await walkTo(school, 110, head, 30)
  const shown = await bench(as)
  // Handbook 3.1: 4.40 read, U 0.15, accept 3.5, hand 0.15: 0.6 mm, stop at 3.5.
  expect(shown.metalLeft[0]).toMatchObject({ takeMm: 0.6, stopAtMm: 3.5, valueMm: 4.4, expandedUncertainty: 0.15, handAllowanceMm: 0.15, where: 'pushrod fore, station 30, height 0, cylinder 1 intake' })
  expect(shown.caution.join(' ')).toContain('A ported wall can hold cold and leak hot.')
})

it('keeps "no more cutting" on the bench until a newer result accepts there', async () => {
  const { head, as } = await student(70)
  const id = await begin(as, head, 70)
  const text = 'no more cutting at bowl, fore, cylinder 1 intake'
  await school.em().transactional(async tx => release(tx, await tx.findOneOrFail(Submission, id), school.hanne, new Date(school.now().getTime() - 60_000), { conditions: [{ criterion: 'W-01', cylinder: 1, side: 'intake', at: null, text }] }))
  expect((await bench(as)).noMoreCutting).toEqual([text])
  const rest = await begin(as, head, 70)
  await as.post(`/api/submissions/${rest}/ask`)
  await scoreSubmission(harness.app, rest)
  // Scored, and still not assessed there: the condition stands.
  expect((await bench(as)).noMoreCutting).toEqual([text])
  const accepted = await school.scored({ op: 70, part: 'rest', tryNumber: 2, head })
  expect(accepted.state).toBe('scored')
  expect((await bench(as)).noMoreCutting).toEqual([])
})

it('has a bench for somebody without a head', async () => {
  const nobody = await school.person('Headless Somebody', ['student'])
  expect(await bench(await api.as(nobody))).toMatchObject({ head: null, next: null, otherHeads: [] })
})

it('computes by hand what the domain computes, and says what cannot be computed', async () => {
  const list = await imre.get<{ items: { name: string, inputs: unknown[], unit: string, source: string }[] }>('/api/compute')
  expect(list.body.items.length).toBeGreaterThan(20)
  for (const one of list.body.items) expect(one, one.name).toMatchObject({ unit: expect.any(String), source: expect.stringMatching(/\w/) })
  expect(await imre.post('/api/compute/nothing-such', {})).toMatchObject({ status: 404, body: { code: 'compute_unknown' } })
  // Handbook 3.1's example: 0.6 mm left.
  const example = { readingMm: 4.4, expandedUncertainty: 0.15, acceptLeastMm: 3.5, hardLeastMm: 3, handAllowanceMm: 0.15 }
  expect(await imre.post('/api/compute/metal-left', example)).toMatchObject({ status: 200, body: { value: 0.6, unit: 'mm' } })
  expect(await imre.post('/api/compute/metal-left', { ...example, hardLeastMm: 5 })).toMatchObject({ status: 422, body: { code: 'compute_refused', title: expect.stringContaining('hard least') } })
  expect(await imre.call('POST', '/api/compute/metal-left', '{"x":1e999}')).toMatchObject({ status: 422, body: { code: 'input_invalid', issues: expect.arrayContaining([{ path: 'x', message: expect.any(String) }]) } })
  expect(await imre.call('POST', '/api/compute/metal-left', '{"x":NaN}')).toMatchObject({ status: 400, body: { code: 'body_not_json' } })
  expect(await imre.post('/api/compute/metal-left', { x: 'x'.repeat(70_000) })).toMatchObject({ status: 413, body: { code: 'body_too_large' } })
})
