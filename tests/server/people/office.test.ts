import { afterAll, beforeAll, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { IdempotencyKey } from '#server/db/entities/IdempotencyKey'
import { User, type Role } from '#server/db/entities/User'
import { sealAudit } from '#server/services/audit/seal-audit'
import { forgetAnswers } from '#server/services/jobs/forget-answers'
import { openSession } from '#server/services/people/sign-in'
import type { Actor } from '#server/utils/actor'
import { recordEvent } from '#server/utils/record-event'
import { findActor } from '#server/utils/session'
import type { AuditRow, PersonDetail } from '#shared/contract/office'
import type { Page, PersonView } from '#shared/contract/views'
import { openHarness, type Harness } from '../harness'
import { serveApi } from '../http'
import { makeSchool } from '../review/school'

let harness: Harness
let corin: Actor
let api: Awaited<ReturnType<typeof serveApi>>
const em = () => harness.app.orm.em.fork()

async function person(name: string, roles: Role[]): Promise<Actor> {
  const user = await em().transactional(async (tx) => {
    const made = tx.create(User, { email: `${crypto.randomUUID().slice(0, 8)}@sallowbeck.example`, name, roles, passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
    tx.persist(made)
    return made
  })
  return { id: user.id, name, email: user.email, roles, unit: 'mm', sessionId: await openSession(em(), user.id, 'a browser') }
}

beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  corin = await person('Corin Ashdown', ['admin'])
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

it('finds people by part of a name or address, wildcards taken as letters, and pages without losing or doubling one', async () => {
  for (let at = 0; at < 7; at += 1) await person(`Tomek Oake ${at}`, ['student'])
  await person('Ruth 100%_sure', ['student'])
  const admin = await api.as(corin)
  const seen: string[] = []
  let after: string | null = null
  do {
    const page: Page<PersonView> = (await admin.get<Page<PersonView>>(`/api/people?search=tomek&limit=3${after ? `&after=${after}` : ''}`)).body
    seen.push(...page.items.map(one => one.name))
    after = page.next
  } while (after)
  expect(seen).toEqual(Array.from({ length: 7 }, (_, at) => `Tomek Oake ${at}`))
  expect((await admin.get<Page<PersonView>>('/api/people?search=%25_')).body.items.map(one => one.name)).toEqual(['Ruth 100%_sure'])
  const newest = (await admin.get<Page<PersonView>>('/api/people?sort=newest&limit=2')).body
  expect(newest.items[0]?.name).toBe('Ruth 100%_sure')
  expect((await admin.get<Page<PersonView>>('/api/people?role=admin')).body.items.map(one => one.name)).toEqual(['Corin Ashdown'])
})

it('gives roles that count at once, and never takes the admin\'s own', async () => {
  const dele = await person('Dele Marchbank', ['student'])
  const admin = await api.as(corin)
  expect((await (await api.as(dele)).get('/api/people')).status).toBe(403)
  expect((await admin.post(`/api/people/${dele.id}/roles`, { roles: ['student', 'admin', 'admin'] })).body).toMatchObject({ roles: ['student', 'admin'] })
  expect((await (await api.as(dele)).get('/api/people')).status).toBe(200)
  expect((await admin.post(`/api/people/${corin.id}/roles`, { roles: ['student'] })).body).toMatchObject({ code: 'own_admin_role', status: 409 })
  expect((await admin.post(`/api/people/${dele.id}/roles`, { roles: [] })).body).toMatchObject({ code: 'input_invalid', status: 422 })
  expect((await admin.post(`/api/people/${crypto.randomUUID()}/roles`, { roles: ['student'] })).body).toMatchObject({ code: 'person_not_found', status: 404 })
})

it('lets two admins who take the role from each other at once leave one of them', async () => {
  const [one, two] = [await person('Osric Pellam', ['admin']), await person('Wen Sallis', ['admin'])]
  const answers = await Promise.all([
    (await api.as(one)).post(`/api/people/${two.id}/roles`, { roles: ['student'] }),
    (await api.as(two)).post(`/api/people/${one.id}/roles`, { roles: ['student'] }),
  ])
  expect(answers.map(answer => answer.status).sort()).toEqual([200, 403])
})

it('ends every sign-in of a person', async () => {
  const nadia = await person('Nadia Quillfeather', ['student'])
  await openSession(em(), nadia.id, 'a phone')
  expect((await (await api.as(corin)).get<PersonDetail>(`/api/people/${nadia.id}`)).body.signedIn).toBe(2)
  expect((await (await api.as(corin)).post(`/api/people/${nadia.id}/end-sessions`, {})).body).toEqual({ ended: 2 })
  expect(await findActor(em(), nadia.sessionId)).toBeNull()
})

it('corrects a name and keeps the old one out of the record', async () => {
  const miss = await person('Bettany Crak', ['student'])
  await (await api.as(corin)).post(`/api/people/${miss.id}/name`, { name: 'Bettany Crake' })
  expect((await (await api.as(corin)).get<PersonDetail>(`/api/people/${miss.id}`)).body.name).toBe('Bettany Crake')
  const [event] = await em().find(AuditEvent, { subject: `person:${miss.id}`, action: 'person-renamed' })
  expect(event?.detail).not.toContain('Crak')
})

it('shows the admin the audit record with who and about whom by name, and whether it is sealed', async () => {
  const joss = await person('Joss Ivelle', ['student'])
  await (await api.as(corin)).post(`/api/people/${joss.id}/roles`, { roles: ['student', 'safety'] })
  const before = (await (await api.as(corin)).get<Page<AuditRow>>('/api/audit?search=joss&limit=5')).body.items[0]
  expect(before).toMatchObject({ actor: 'Corin Ashdown', action: 'roles-changed', subject: 'person Joss Ivelle', number: null, sealed: false })
  await sealAudit(em(), 'minute')
  const after = (await (await api.as(corin)).get<Page<AuditRow>>('/api/audit?search=joss&limit=5')).body.items[0]
  expect(after?.number).toBeGreaterThan(0)
  expect(after?.sealed).toBe(true)
})

it('pages through the whole record in both orders without losing or doubling an event', async () => {
  // A client of the tests signs in, which is an event: one for all of it.
  const admin = await api.as(corin)
  for (const sort of ['newest', 'oldest']) {
    const ids: string[] = []
    let after: string | null = null
    do {
      const page: Page<AuditRow> = (await admin.get<Page<AuditRow>>(`/api/audit?sort=${sort}&limit=4${after ? `&after=${after}` : ''}`)).body
      ids.push(...page.items.map(one => one.id))
      after = page.next
    } while (after)
    expect(new Set(ids).size).toBe(ids.length)
    expect(ids.length).toBe(await em().count(AuditEvent))
  }
  expect((await admin.get('/api/audit?after=nonsense')).body).toMatchObject({ code: 'page_unknown', status: 422 })
})

it('shows an instructor the events of heads taught, and the safety officer those of tools and stops, and nothing more', async () => {
  const own = await openHarness()
  const server = await serveApi(own)
  try {
    const school = await makeSchool(own)
    const elsewhere = crypto.randomUUID()
    await own.app.orm.em.fork().transactional(async (tx) => {
      recordEvent(tx, { actor: 'job', action: 'submission.start', subject: `head:${school.headId}` })
      recordEvent(tx, { actor: 'job', action: 'head-stopped', subject: `head:${elsewhere}` })
      recordEvent(tx, { actor: 'job', action: 'clearance-given', subject: `clearance:${elsewhere}` })
      recordEvent(tx, { actor: 'job', action: 'roles-changed', subject: `person:${elsewhere}` })
    })
    const seen = async (actor: Actor) => (await (await server.as(actor)).get<Page<AuditRow>>('/api/audit')).body.items.map(one => one.action).sort()
    expect(await seen(school.hanne)).toEqual(['submission.start'])
    expect(await seen(school.stranger)).toEqual([])
    expect(await seen(school.ingrid)).toEqual(['clearance-given', 'head-stopped'])
    expect(await seen(school.corin)).toEqual(expect.arrayContaining(['clearance-given', 'head-stopped', 'roles-changed', 'submission.start']))
  }
  finally {
    await server.close()
    await own.close()
  }
})

it('forgets the answers to calls after two months, and not before', async () => {
  const now = new Date()
  const wen = await person('Wen Forgotten', ['student'])
  const kept = (days: number) => ({ person: wen.id, key: crypto.randomUUID(), route: 'POST /x', bodyHash: 'a'.repeat(64), status: 200, answer: {}, at: new Date(now.getTime() - days * 86_400_000) })
  await em().transactional(async (tx) => {
    for (const days of [1, 59, 61, 400]) tx.persist(tx.create(IdempotencyKey, kept(days)))
  })
  expect(await forgetAnswers(em(), now)).toBe(2)
  expect(await em().count(IdempotencyKey, { person: wen.id })).toBe(2)
})
