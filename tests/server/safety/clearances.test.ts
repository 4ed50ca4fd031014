import { afterAll, beforeAll, expect, it } from 'vitest'
import { createClock } from '#server/adapters/clock/clock'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Clearance } from '#server/db/entities/Clearance'
import { Cohort } from '#server/db/entities/Cohort'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { ClearanceOne, ClearanceRow, PersonSafetyView } from '#shared/contract/safety'
import { schoolDay, startOfDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import type { HeadView, Page } from '#shared/contract/views'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { clearFor, sign, walkTo } from '../walk'

let harness: Harness, api: Api, school: TestSchool, ingrid: Caller, today: string
// What the school's rubric asks for on the way: handbook 7, "Clearances as data"; the bead cabinet and the saw are asked of nobody.
const routeTools = ['die-grinder', 'flow-bench', 'hot-tank', 'pressure-rig', 'right-angle-grinder']
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  ingrid = await api.as(school.ingrid)
  today = schoolDay(school.now())
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

let slot = 0
async function here(name: string): Promise<Actor> {
  const who = await school.person(name, ['student'])
  slot += 1
  await school.em().transactional(async (tx) => {
    tx.persist(tx.create(BenchPlace, { cohort: tx.getReference(Cohort, school.cohortId), person: tx.getReference(User, who.id), name, email: who.email, state: 'here', slot, createdAt: school.now() }))
  })
  return who
}
const list = async (query = '') => (await ingrid.get<Page<ClearanceRow>>(`/api/clearances${query}`)).body
const give = (person: string, tool: string, until: string) => ingrid.post<ClearanceOne>('/api/clearances', { person, tool, until })
const stageOf = async (caller: Caller, headId: string, op: number) => (await caller.get<HeadView>(`/api/heads/${headId}`)).body.stages.find(one => one.op === op)

it('lists everybody of the shop against what the route asks of them, staff included, and finds who lacks what', async () => {
  const ruth = await here('Ruth Amberlow')
  await here('Wen Sallis')
  await clearFor(school, ruth)
  const all = await list()
  expect(all.items.map(one => one.name)).toEqual(['Hanne Brockwell', 'Ingrid Tarnhow', 'Marit Garsdale', 'Ottoline Karr', 'Ruth Amberlow', 'Silas Okonray', 'Wen Sallis'])
  expect(all.items.find(one => one.name === 'Wen Sallis')).toMatchObject({ cohort: 'Alder', staff: false, consent: 'none', missing: routeTools, clearances: [] })
  expect(all.items.find(one => one.name === 'Ruth Amberlow')).toMatchObject({ consent: 'signed', missing: [] })
  expect(all.items.find(one => one.name === 'Hanne Brockwell')).toMatchObject({ staff: true, cohort: null, missing: [] })
  expect((await list('?lacking=clearance')).items.map(one => one.name)).toEqual(['Wen Sallis'])
  expect((await list('?lacking=consent&search=alder')).items.map(one => one.name)).toEqual(['Wen Sallis'])
  expect((await list('?search=%25')).items).toEqual([])
  expect((await list('?who=everybody')).items.map(one => one.name)).toContain('Imre Tallowin')
  const seen: string[] = []
  let after: string | null = null
  do {
    const page: Page<ClearanceRow> = await list(`?limit=2${after ? `&after=${after}` : ''}`)
    seen.push(...page.items.map(one => one.name))
    after = page.next
  } while (after)
  expect(seen).toEqual(all.items.map(one => one.name))
})

it('puts first whose clearance lapses first, and those with none last', async () => {
  const dele = await here('Dele Marchbank')
  await give(dele.id, 'die-grinder', dayAfter(today, 400))
  await give(dele.id, 'flow-bench', dayAfter(today, 2))
  const names = (await list('?sort=expiry')).items.map(one => one.name)
  expect(names.slice(0, 2)).toEqual(['Dele Marchbank', 'Ruth Amberlow'])
  const pages = [await list('?sort=expiry&limit=1')]
  pages.push(await list(`?sort=expiry&limit=1&after=${pages[0]?.next}`))
  expect(pages.map(page => page.items[0]?.name)).toEqual(['Dele Marchbank', 'Ruth Amberlow'])
})

it('runs to the end of its last day by the school\'s clock, then shuts the stage by itself and says why', async () => {
  const tomek = await here('Tomek Oake')
  await sign(school, tomek)
  await clearFor(school, tomek, { days: 900, tools: ['hot-tank', 'pressure-rig', 'flow-bench', 'right-angle-grinder'] })
  const headId = await school.anotherHead('DNK-0801', tomek)
  await walkTo(school, 70, headId)
  const caller = await api.as(tomek)
  expect(await stageOf(caller, headId, 70)).toMatchObject({ state: 'shut', why: 'You are not cleared for the die grinder. See the safety officer.' })
  const until = dayAfter(today, 40)
  expect(await give(tomek.id, 'die-grinder', until)).toMatchObject({ status: 201, body: { tool: 'die-grinder', until, lapsed: false, givenBy: 'Ingrid Tarnhow' } })
  expect((await stageOf(caller, headId, 70))?.state).toBe('open')

  const { clock } = harness.app
  const at = (instant: number) => {
    harness.app.clock = createClock({ demoNow: new Date(instant).toISOString(), seededAt: new Date().toISOString() })
  }
  try {
    const midnight = startOfDay(dayAfter(until, 1)).getTime()
    at(midnight - 60_000)
    expect((await stageOf(caller, headId, 70))?.state).toBe('open')
    at(midnight)
    expect(await stageOf(caller, headId, 70)).toMatchObject({ state: 'shut', why: 'Your clearance for the die grinder has lapsed. See the safety officer.' })
    expect((await list('?search=Tomek')).items[0]).toMatchObject({ missing: ['die-grinder'], clearances: expect.arrayContaining([expect.objectContaining({ tool: 'die-grinder', lapsed: true })]) })
  }
  finally {
    harness.app.clock = clock
  }
})

it('lets the newest word count, also when it is the shorter, and keeps the older ones to be seen', async () => {
  const osric = await here('Osric Pellam')
  await give(osric.id, 'hot-tank', dayAfter(today, 300))
  await give(osric.id, 'hot-tank', dayAfter(today, 10))
  const { body } = await ingrid.get<PersonSafetyView>(`/api/clearances/people/${osric.id}`)
  expect(body.clearances).toMatchObject([{ tool: 'hot-tank', until: dayAfter(today, 10) }])
  expect(body.history.map(one => [one.until, one.withdrawnAt !== null])).toEqual(expect.arrayContaining([[dayAfter(today, 10), false], [dayAfter(today, 300), true]]))
  // Two officers at once: one clearance stands.
  await Promise.all([20, 30, 40].map(days => give(osric.id, 'saw', dayAfter(today, days))))
  await Promise.all([20, 30, 40].map(days => give(osric.id, 'flow-bench', dayAfter(today, days))))
  expect(await school.em().count(Clearance, { person: osric.id, tool: 'flow-bench', withdrawnAt: null })).toBe(1)
  expect(await school.em().count(Clearance, { person: osric.id, tool: 'saw' })).toBe(0)
})

it('takes a clearance back at once, and only once', async () => {
  const nadia = await here('Nadia Quillfeather')
  await clearFor(school, nadia)
  const headId = await school.anotherHead('DNK-0802', nadia)
  await walkTo(school, 70, headId)
  const caller = await api.as(nadia)
  expect((await stageOf(caller, headId, 70))?.state).toBe('open')
  const grinder = (await list('?search=Nadia')).items[0]?.clearances.find(one => one.tool === 'die-grinder')
  expect(await ingrid.post(`/api/clearances/${grinder?.id}/withdraw`)).toMatchObject({ status: 200, body: { name: 'Nadia Quillfeather', missing: ['die-grinder'] } })
  expect(await stageOf(caller, headId, 70)).toMatchObject({ state: 'shut', why: 'You are not cleared for the die grinder. See the safety officer.' })
  expect(await ingrid.post(`/api/clearances/${grinder?.id}/withdraw`)).toMatchObject({ status: 409, body: { code: 'clearance_withdrawn' } })
  expect(await ingrid.post('/api/clearances/00000000-0000-4000-8000-000000000000/withdraw')).toMatchObject({ status: 404, body: { code: 'clearance_not_found' } })
})

it('refuses a clearance for yesterday, a day that is none, four years, an unknown tool or person, and the saw for a student', async () => {
  const callum = await here('Callum Thrapp')
  const refused: [unknown, number, string][] = [
    [{ person: callum.id, tool: 'die-grinder', until: dayAfter(today, -1) }, 422, 'clearance_in_past'],
    [{ person: callum.id, tool: 'die-grinder', until: '2027-02-31' }, 422, 'input_invalid'],
    [{ person: callum.id, tool: 'die-grinder', until: dayAfter(today, 4 * 366) }, 422, 'clearance_in_past'],
    [{ person: callum.id, tool: 'welder', until: today }, 422, 'input_invalid'],
    [{ person: callum.id, tool: 'saw', until: today }, 422, 'tool_for_staff'],
    [{ person: '00000000-0000-4000-8000-000000000000', tool: 'saw', until: today }, 404, 'person_not_found'],
    [{ person: 'Callum', tool: 'saw', until: today }, 422, 'input_invalid'],
  ]
  for (const [body, status, code] of refused) expect(await ingrid.post('/api/clearances', body), JSON.stringify(body)).toMatchObject({ status, body: { code } })
  expect(await school.em().count(Clearance, { person: callum.id })).toBe(0)
  expect((await give(school.silas.id, 'saw', today)).status).toBe(201)
  // The office reads and does not write.
  const corin = await api.as(school.corin)
  expect((await corin.get('/api/clearances')).status).toBe(200)
  expect(await corin.post('/api/clearances', { person: callum.id, tool: 'die-grinder', until: today })).toMatchObject({ status: 403, body: { code: 'not_allowed' } })
})
