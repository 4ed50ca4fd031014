import { afterAll, beforeAll, expect, it } from 'vitest'
import { Consent, SafetyNote, SharingChoice } from '#server/db/entities/Consent'
import { mayShare } from '#server/services/safety/may-share'
import type { Actor } from '#server/utils/actor'
import type { ConsentTextView, ConsentView, PersonSafetyView } from '#shared/contract/safety'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import type { HeadView } from '#shared/contract/views'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, schoolConsent, type TestSchool } from '../review/school'
import { walkTo } from '../walk'

let harness: Harness, api: Api, school: TestSchool, ingrid: Caller
let count = 0
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  ingrid = await api.as(school.ingrid)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

/** A student with a clearance for every tool and a head at op 70, who has signed nothing. */
async function newcomer(): Promise<{ who: Actor, caller: Caller, headId: string }> {
  count += 1
  const who = await school.person(`Newcomer${count} Pell`, ['student'])
  for (const tool of ['hot-tank', 'pressure-rig', 'flow-bench', 'die-grinder', 'right-angle-grinder']) {
    expect((await ingrid.post('/api/clearances', { person: who.id, tool, until: dayAfter(schoolDay(school.now()), 60) })).status).toBe(201)
  }
  const headId = await school.anotherHead(`DNK-07${String(count).padStart(2, '0')}`, who)
  await walkTo(school, 70, headId)
  return { who, caller: await api.as(who), headId }
}
const text = async () => (await ingrid.get<ConsentTextView>('/api/consent/text')).body
const form = async (change: Record<string, unknown> = {}) => {
  const { version, clauses } = await text()
  return { version, ticks: clauses.map(one => one.code), signedAs: 'A. Newcomer', under18: false, ...change }
}
const stageOf = async (caller: Caller, headId: string, op: number) => (await caller.get<HeadView>(`/api/heads/${headId}`)).body.stages.find(one => one.op === op)
const nothingKept = async (who: Actor) => {
  expect(await school.em().count(Consent, { person: who.id })).toBe(0)
  expect(await school.em().count(SharingChoice, { person: who.id })).toBe(0)
  expect(await school.em().count(SafetyNote, { person: who.id })).toBe(0)
}

it('shuts every stage with a tool until the safety form is signed, and opens it then', async () => {
  const { caller, headId } = await newcomer()
  expect(await stageOf(caller, headId, 70)).toMatchObject({ state: 'shut', why: 'Sign the safety form first.' })
  expect(await caller.post(`/api/heads/${headId}/stages/70/submissions`)).toMatchObject({ status: 409, body: { code: 'consent_missing', title: 'Sign the safety form first.' } })
  expect((await caller.get<ConsentView>('/api/consent')).body).toMatchObject({ state: 'none', signed: null, firstAid: '' })
  const signed = await caller.post<ConsentView>('/api/consent', await form())
  expect(signed).toMatchObject({ status: 201, body: { state: 'signed', signed: { version: 1, as: 'A. Newcomer', guardian: null } } })
  expect(await stageOf(caller, headId, 70)).toMatchObject({ state: 'open', why: null })
  expect((await caller.post(`/api/heads/${headId}/stages/70/submissions`)).status).toBe(201)
})

it('leaves a stage without a tool open to whoever has not signed', async () => {
  // Op 10 and op 40 name no clearance in the school's rubric.
  const { caller, headId } = await newcomer()
  expect((await stageOf(caller, headId, 10))?.why).toBe(null)
})

it.each([
  ['a tick left out', async () => form({ ticks: schoolConsent.clauses.slice(1).map(one => one.code) }), 422, 'ticks_missing'],
  ['an older version', async () => form({ version: 99 }), 409, 'consent_stale'],
  ['nobody\'s name', async () => form({ signedAs: '  ' }), 422, 'input_invalid'],
  ['under 18 without a guardian', async () => form({ under18: true }), 422, 'input_invalid'],
  ['a choice the form does not have', async () => form({ choices: { 'my-diary': true } }), 422, 'choice_unknown'],
  ['a NUL in the first-aid words', async () => form({ firstAid: 'nuts\0' }), 422, 'input_invalid'],
  ['a lone surrogate in the name', async () => form({ signedAs: 'A \ud800' }), 422, 'input_invalid'],
  ['a boot size that is none', async () => form({ bootSize: '1e999' }), 422, 'input_invalid'],
] as const)('refuses a signature with %s, and keeps nothing', async (_what, body, status, code) => {
  const { who, caller } = await newcomer()
  expect(await caller.post('/api/consent', await body())).toMatchObject({ status, body: { code } })
  await nothingKept(who)
})

it('names the points that still want a tick', async () => {
  const { caller } = await newcomer()
  const { body } = await caller.post<{ issues: { path: string }[] }>('/api/consent', await form({ ticks: schoolConsent.clauses.slice(2).map(one => one.code) }))
  expect(body.issues.map(one => one.path)).toEqual(schoolConsent.clauses.slice(0, 2).map(one => `ticks.${one.code}`))
})

it('keeps one signature of two taps at once, and the guardian\'s name of somebody under 18', async () => {
  const { who, caller } = await newcomer()
  const body = await form({ under18: true, guardian: 'B. Newcomer' })
  const answers = await Promise.all([caller.post('/api/consent', body), caller.post('/api/consent', body)])
  expect(answers.map(one => one.status).sort()).toEqual([201, 409])
  expect(answers.find(one => one.status === 409)?.body.code).toBe('consent_signed')
  expect(await school.em().find(Consent, { person: who.id })).toMatchObject([{ guardian: 'B. Newcomer' }])
})

it('gives first-aid words to the safety officer and their person alone, and lets them be emptied', async () => {
  const { who, caller } = await newcomer()
  await caller.post('/api/consent', await form({ firstAid: 'Inhaler in the blue bag.', bootSize: '8,5' }))
  const seenBy = async (one: Actor) => (await (await api.as(one)).get<PersonSafetyView>(`/api/clearances/people/${who.id}`))
  expect((await seenBy(school.ingrid)).body).toMatchObject({ firstAid: 'Inhaler in the blue bag.', bootSize: '8.5' })
  const office = await seenBy(school.corin)
  expect(office.body).toMatchObject({ firstAid: null, consent: 'signed' })
  expect(JSON.stringify(office.body)).not.toContain('Inhaler')
  expect((await seenBy(school.hanne)).status).toBe(403)
  expect((await caller.post<ConsentView>('/api/consent/note', { firstAid: '', bootSize: '9' })).body).toMatchObject({ firstAid: '', bootSize: '9', state: 'signed' })
  expect((await seenBy(school.ingrid)).body).toMatchObject({ firstAid: '' })
  const events = await school.em().getConnection().execute<{ detail: string }[]>('select "detail"::text as detail from "audit_event" where "subject" = ?', [`person:${who.id}`])
  expect(events.length).toBeGreaterThan(0)
  expect(JSON.stringify(events)).not.toContain('Inhaler')
})

it('shares nothing until somebody says so, and stops at once when it is taken back', async () => {
  const { who, caller } = await newcomer()
  await caller.post('/api/consent', await form({ choices: { 'sponsor-result': true, 'cohort-photos': false } }))
  const shared = async () => [await mayShare(school.em(), who.id, 'sponsor-result'), await mayShare(school.em(), who.id, 'cohort-photos')]
  expect(await shared()).toEqual([true, false])
  expect((await caller.post<ConsentView>('/api/consent/choices', { code: 'sponsor-result', allowed: false })).body.choices.find(one => one.code === 'sponsor-result')).toMatchObject({ allowed: false })
  expect(await shared()).toEqual([false, false])
  expect(await caller.post('/api/consent/choices', { code: 'my-diary', allowed: true })).toMatchObject({ status: 422, body: { code: 'choice_unknown' } })
  // What was said stays said: yes, then no.
  expect((await school.em().find(SharingChoice, { person: who.id }, { orderBy: { at: 'asc' } })).map(one => one.allowed)).toEqual([true, false])
})

it('keeps signatures when words about sharing change, and asks everybody again when a safety clause does', async () => {
  const { caller, headId } = await newcomer()
  await caller.post('/api/consent', await form())
  const one = await text()
  const clauses = one.clauses.map(clause => clause.safety ? clause : { ...clause, text: 'Pictures are kept with your record.' })
  expect((await ingrid.post<ConsentTextView>('/api/consent/text', { after: one.version, clauses, choices: one.choices })).body).toMatchObject({ version: one.version + 1, standsFrom: one.standsFrom })
  expect((await caller.get<ConsentView>('/api/consent')).body).toMatchObject({ version: one.version + 1, state: 'signed', signed: { version: one.version }, changed: ['pictures'] })
  expect((await stageOf(caller, headId, 70))?.state).toBe('open')

  const louder = clauses.map(clause => clause.code === 'noise' ? { ...clause, text: `${clause.text} Ten minutes of every hour.` } : clause)
  expect((await ingrid.post<ConsentTextView>('/api/consent/text', { after: one.version + 1, clauses: louder, choices: one.choices })).body).toMatchObject({ version: one.version + 2, standsFrom: one.version + 2 })
  expect((await caller.get<ConsentView>('/api/consent')).body).toMatchObject({ state: 'asked again', changed: ['noise', 'pictures'] })
  expect(await stageOf(caller, headId, 70)).toMatchObject({ state: 'shut', why: 'The safety form changed since you signed it. Sign it again first.' })
  await caller.post('/api/consent', await form())
  expect((await stageOf(caller, headId, 70))?.state).toBe('open')
  // A safety clause that is taken out is a change too.
  const fewer = louder.filter(clause => clause.code !== 'lifting')
  await ingrid.post('/api/consent/text', { after: one.version + 2, clauses: fewer, choices: one.choices })
  expect((await caller.get<ConsentView>('/api/consent')).body.state).toBe('asked again')
})

it('saves one of two versions written at once, and refuses one that says a clause twice', async () => {
  const { version, clauses, choices } = await text()
  const answers = await Promise.all([1, 2].map(() => ingrid.post('/api/consent/text', { after: version, clauses, choices })))
  expect(answers.map(one => one.status).sort()).toEqual([201, 409])
  expect(answers.find(one => one.status === 409)?.body.code).toBe('consent_text_stale')
  expect(await ingrid.post('/api/consent/text', { after: version + 1, clauses: [...clauses, clauses[0]], choices })).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  expect((await text()).version).toBe(version + 1)
})
