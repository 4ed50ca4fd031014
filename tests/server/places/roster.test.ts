import { afterAll, beforeAll, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { readRoster } from '#server/services/places/read-roster'
import type { CohortListView, RosterPreview } from '#shared/contract/places'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool } from '../review/school'
import { emailOf, openOffice, type TestOffice } from './office'

let harness: Harness, office: TestOffice, api: Api, desk: Caller
beforeAll(async () => {
  harness = await openHarness()
  office = await openOffice(harness)
  api = await serveApi(harness)
  desk = await api.as(office.corin)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

type Answer = RosterPreview & { code?: string, preview?: RosterPreview }
const preview = (code: string, csv: string) => desk.post<Answer>(`/api/cohorts/${code}/roster/preview`, { csv })
const take = (code: string, csv: string, seen: string, key?: string) => desk.post<Answer>(`/api/cohorts/${code}/roster`, { csv, seen }, key)
const placesOf = (code: string) => office.em().find(BenchPlace, { cohort: { code } }, { orderBy: { slot: 'asc' } })

const good = 'name,email,sponsor\nWen Sallis,wen.r@sallowbeck.example,Hexley Row Rebuild Ltd\nRuth Amberlow,ruth.r@sallowbeck.example,\n'

it('takes a list exactly as it was previewed: confirmed places, accounts and invitations', async () => {
  await office.cohort({ code: 'ROS-01', places: 3 })
  const seen = await preview('ROS-01', good)
  expect(seen).toMatchObject({ status: 200, body: { good: 2, bad: 0, free: 3, rows: [{ line: 2, name: 'Wen Sallis', email: 'wen.r@sallowbeck.example', problems: [] }, { line: 3, sponsor: '' }] } })
  expect(await placesOf('ROS-01')).toEqual([])
  const taken = await take('ROS-01', good, seen.body.seen)
  expect(taken.status).toBe(201)
  expect((await placesOf('ROS-01')).map(one => [one.name, one.state, one.slot, one.note])).toEqual([['Wen Sallis', 'confirmed', 1, 'Sponsor as listed: Hexley Row Rebuild Ltd'], ['Ruth Amberlow', 'confirmed', 2, '']])
  expect((await office.em().find(User, { email: { $like: '%.r@sallowbeck.example' } })).map(one => one.roles)).toEqual([['student'], ['student']])
  expect((await office.mails('invitation')).map(mail => mail.to).sort()).toEqual(['ruth.r@sallowbeck.example', 'wen.r@sallowbeck.example'])
  // The same list again: everybody is there already.
  expect(await take('ROS-01', good, seen.body.seen)).toMatchObject({ status: 409, body: { code: 'roster_changed', preview: { bad: 2 } } })
})

it('names what is wrong with each row, duplicates and formula cells among it, and takes none of them', async () => {
  await office.cohort({ code: 'ROS-02', places: 8 })
  await office.ask('ROS-02', 'Osric Asked')
  const csv = [
    'Name;E-mail is below;email', 'x;x;x@sallowbeck.example',
  ].join('\n')
  expect((await preview('ROS-02', csv)).body.rows).toMatchObject([{ line: 2, email: 'x@sallowbeck.example', problems: [] }])
  const bad = [
    'name,email', // 1
    'Tomek Oake,tomek.b@sallowbeck.example', // 2 good
    'Tomek Again,TOMEK.B@sallowbeck.example ', // 3 the same e-mail
    '"=HYPERLINK(""http://x.example"",""Wen"")",wen.b@sallowbeck.example', // 4 formula in the name
    'Plus,+44 1632 960000', // 5 formula, and no address
    '@import,at.b@sallowbeck.example', // 6
    '-1,minus.b@sallowbeck.example', // 7
    ',nobody.b@sallowbeck.example', // 8 no name
    'Nadia Quillfeather,', // 9 no e-mail
    'Nadia Quillfeather,nadia at sallowbeck', // 10
    `Osric Asked,${emailOf('Osric Asked')}`, // 11 on the list
    'Dele,dele.b@sallowbeck.example,and more', // 12 more cells
    '"\tTab",tab.b@sallowbeck.example', // 13
  ].join('\r\n')
  const { body } = await preview('ROS-02', bad)
  expect(body.rows.map(row => [row.line, row.problems.length > 0])).toEqual([[2, false], ...[3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13].map(line => [line, true])])
  const said = (line: number) => body.rows.find(row => row.line === line)?.problems.join(' ')
  expect(said(3)).toContain('line 2')
  for (const line of [4, 6, 7, 13]) expect(said(line), String(line)).toContain('formula')
  expect(said(5)).toContain('formula')
  expect(said(5)).toContain('not an e-mail address')
  expect(said(8)).toContain('name is missing')
  expect(said(9)).toBe('The e-mail is missing.')
  expect(said(11)).toContain('already')
  expect(said(12)).toContain('more cells')
  expect({ good: body.good, bad: body.bad }).toEqual({ good: 1, bad: 11 })
  expect(await take('ROS-02', bad, body.seen)).toMatchObject({ status: 422, body: { code: 'roster_has_problems', preview: { bad: 11 } } })
  expect(await placesOf('ROS-02')).toHaveLength(1)
})

it('says which rows find no place, in the order of the list', async () => {
  await office.cohort({ code: 'ROS-03', places: 2 })
  await office.askAndOpen('ROS-03', 'Holder')
  const { body } = await preview('ROS-03', 'email,name\na.c@sallowbeck.example,A\nnot an address,B\nc.c@sallowbeck.example,C\n')
  expect(body.free).toBe(1)
  expect(body.rows.map(row => row.problems)).toEqual([[], ['That is not an e-mail address.'], ['No place is left for this row.']])
})

it('takes nothing when the cohort changed since the preview, or the list is another', async () => {
  await office.cohort({ code: 'ROS-04', places: 2 })
  const { body: { seen } } = await preview('ROS-04', good)
  await office.askAndOpen('ROS-04', 'Came Between')
  expect(await take('ROS-04', good, seen)).toMatchObject({ status: 409, body: { code: 'roster_changed', preview: { free: 1, bad: 1 } } })
  const again = await preview('ROS-04', good.replace('\nRuth Amberlow,ruth.r@sallowbeck.example,', ''))
  expect(await take('ROS-04', good, again.body.seen)).toMatchObject({ status: 409, body: { code: 'roster_changed' } })
  expect((await placesOf('ROS-04')).map(one => one.name)).toEqual(['Came Between'])
})

it('takes one of two lists that are taken at once for the last places', async () => {
  await office.cohort({ code: 'ROS-05', places: 2 })
  const lists = ['a', 'b'].map(letter => `name,email\nOne ${letter},one.${letter}@sallowbeck.example\nTwo ${letter},two.${letter}@sallowbeck.example\n`)
  const seen = await Promise.all(lists.map(async csv => (await preview('ROS-05', csv)).body.seen))
  const taken = await Promise.all(lists.map((csv, index) => take('ROS-05', csv, seen[index]!)))
  expect(taken.map(answer => answer.status).sort()).toEqual([201, 409])
  expect(await placesOf('ROS-05')).toHaveLength(2)
})

it('takes a list once under one key', async () => {
  await office.cohort({ code: 'ROS-06', places: 4 })
  const { body: { seen } } = await preview('ROS-06', good)
  const key = crypto.randomUUID()
  const [first, again] = [await take('ROS-06', good, seen, key), await take('ROS-06', good, seen, key)]
  expect([first.status, again.status]).toEqual([201, 201])
  expect(await placesOf('ROS-06')).toHaveLength(2)
})

it.each([
  ['without the columns', 'who,where\nWen,wen@sallowbeck.example'], ['without a row', 'name,email\n\n\n'], ['that is empty', ''], ['of 201 rows', `name,email\n${Array.from({ length: 201 }, (_, n) => `N${n},n${n}@sallowbeck.example`).join('\n')}`],
])('a list %s is refused', async (_what, csv) => {
  await office.em().nativeUpdate(Cohort, { code: 'ROS-06' }, { places: 60 })
  expect(await preview('ROS-06', csv)).toMatchObject({ status: 422, body: { code: 'roster_unreadable' } })
})

it('a list with NUL in it is refused', async () => {
  expect(await preview('ROS-06', 'name,email\nW\0en,wen@sallowbeck.example')).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
})

it('counts lines as an editor does, past quoted line breaks and a byte order mark', () => {
  const rows = readRoster('\uFEFFname,email\n"Two\nlines",a@sallowbeck.example\n\nLast,b@sallowbeck.example')
  expect(rows.map(row => [row.line, row.email])).toEqual([[2, 'a@sallowbeck.example'], [5, 'b@sallowbeck.example']])
})

it('lists a cohort for the wall: benches, heads, forms, clearances and who waits; instructors only those they teach', async () => {
  const school = await makeSchool({ app: harness.app })
  const cohort = await office.em().findOneOrFail(Cohort, { code: 'ALD-26' })
  await office.em().transactional(async (tx) => {
    tx.persist(tx.create(BenchPlace, { cohort: tx.getReference(Cohort, cohort.id), person: tx.getReference(User, school.imre.id), name: 'Imre Tallowin', email: school.imre.email, state: 'here', slot: 1, createdAt: new Date() }))
  })
  const list = async (who: { id: string }) => (await api.as(who)).get<CohortListView>('/api/cohorts/ALD-26/list')
  const head = await office.em().findOneOrFail(PracticeHead, school.headId)
  expect(await list(school.hanne)).toMatchObject({ status: 200, body: { cohort: { code: 'ALD-26', taken: 1 }, people: [{ slot: 1, name: 'Imre Tallowin', head: head.number, consent: false, clearances: [] }], waiting: [] } })
  expect((await list(school.stranger)).status).toBe(404)
  expect((await list(office.corin)).status).toBe(200)
  expect((await list(school.imre)).status).toBe(403)
  expect((await (await api.as(school.hanne)).get<{ items: { code: string }[] }>('/api/cohorts')).body.items.map(one => one.code)).toEqual(['ALD-26'])
})

it('shows a person their own places with the link, and nobody else\'s', async () => {
  const places = await placesOf('ROS-01')
  const wen = await office.em().findOneOrFail(User, { email: 'wen.r@sallowbeck.example' })
  const { body } = await (await api.as(wen)).get<{ items: { name: string, link: string, state: string, cohort: { code: string } }[] }>('/api/me/places')
  expect(body.items.map(one => [one.cohort.code, one.state]).sort()).toEqual([['ROS-01', 'confirmed'], ['ROS-06', 'confirmed']])
  expect(body.items.find(one => one.cohort.code === 'ROS-01')?.link).toBe(`${harness.config.publicUrl}/place/${office.token(places[0]!)}`)
  expect((await (await api.as(office.corin)).get<{ items: unknown[] }>('/api/me/places')).body.items).toEqual([])
})
