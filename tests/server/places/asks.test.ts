import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { AskTry } from '#server/db/entities/AskTry'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { askForPlace } from '#server/services/places/ask-for-place'
import { passOffers } from '#server/services/places/pass-offers'
import type { App } from '#server/utils/app'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api } from '../http'
import { askRound } from '../../../scripts/lib/ask-round'
import { openOffice, type TestOffice } from './office'

let harness: Harness, office: TestOffice, api: Api
beforeAll(async () => {
  harness = await openHarness()
  office = await openOffice(harness)
  api = await serveApi(harness)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

const ask = (code: string, body: unknown) => api.nobody.post(`/api/cohorts/${code}/asks`, body)

it('mails the link and holds nothing until it is opened', async () => {
  await office.cohort({ code: 'ASK-01', places: 2 })
  const place = await office.ask('ASK-01', 'Wen One')
  expect(place).toMatchObject({ state: 'asked', slot: null, listNumber: 1, heldUntil: null })
  const [mail] = await office.mails('place-asked')
  expect(mail?.text).toContain(`/place/${office.token(place)}`)
  expect((await api.nobody.get(`/api/cohorts/ASK-01/offer`)).body).toMatchObject({ placesLeft: 2 })
  // A mail scanner looks at the link; only the page's own call opens it.
  expect((await api.nobody.get(`/api/place-links/${office.token(place)}`)).body).toMatchObject({ state: 'asked', doing: 'open' })
  expect((await office.again(place)).state).toBe('asked')
})

it('lets eight invented addresses hold nothing', async () => {
  await office.cohort({ code: 'ASK-02' })
  for (const name of ['a', 'b', 'c', 'd', 'e', 'f', 'g', 'h']) await office.ask('ASK-02', `Invented ${name}`)
  expect((await api.nobody.get('/api/cohorts/ASK-02/offer')).body).toMatchObject({ places: 8, placesLeft: 8 })
  const place = await office.askAndOpen('ASK-02', 'Ruth Real')
  // Nine asked before or with her; the first to open is the first to have a bench.
  expect(place).toMatchObject({ state: 'offered', slot: 1, listNumber: 9 })
})

it('answers an ask made before just like a first one, mails its link again, and gives no second number', async () => {
  await office.cohort({ code: 'ASK-03' })
  const body = { name: 'Nadia Twice', email: 'Nadia.Twice@sallowbeck.example' }
  const first = await ask('ASK-03', body)
  const again = await ask('ASK-03', { ...body, name: 'Somebody Else' })
  expect(first).toMatchObject({ status: 202, body: { sentTo: 'nadia.twice@sallowbeck.example', freeNow: true } })
  expect(again.body).toEqual(first.body)
  const places = await office.em().find(BenchPlace, { cohort: { code: 'ASK-03' } })
  expect(places.map(one => [one.name, one.listNumber])).toEqual([['Nadia Twice', 1]])
  const mails = (await office.mails('place-asked')).filter(mail => mail.to === 'nadia.twice@sallowbeck.example')
  expect(mails).toHaveLength(2)
  expect(new Set(mails.map(mail => /\/place\/(\S+)/.exec(mail.text)?.[1]))).toEqual(new Set([office.token(places[0]!)]))
})

it('stops asks after three for one e-mail, whether or not it asked before, and says when to come back', async () => {
  await office.cohort({ code: 'ASK-04' })
  const body = { name: 'Osric Often', email: 'osric.often@sallowbeck.example' }
  for (let n = 0; n < 3; n += 1) expect((await ask('ASK-04', body)).status).toBe(202)
  const refused = await ask('ASK-04', body)
  expect(refused).toMatchObject({ status: 429, body: { code: 'asks_too_many' } })
  expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(3500)
})

it('counts no more than ten asks of one network address an hour, also when they come at once', async () => {
  await office.cohort({ code: 'ASK-05' })
  const { countAsk } = await import('#server/services/places/ask-throttle')
  const ends = await Promise.allSettled(Array.from({ length: 25 }, (_, n) => countAsk(office.em(), `flood-${n}@sallowbeck.example`, '10.9.9.9', new Date())))
  expect(ends.filter(end => end.status === 'fulfilled')).toHaveLength(10)
  expect(ends.find(end => end.status === 'rejected')).toMatchObject({ reason: { code: 'asks_too_many' } })
})

describe('bad asks', () => {
  const good = { name: 'Wen', email: 'wen.bad@sallowbeck.example' }
  it.each([
    ['without a name', { ...good, name: ' ' }], ['with no e-mail address', { ...good, email: 'not an address' }], ['with NUL in the name', { ...good, name: 'W\0en' }],
    ['with a lone surrogate in the note', { ...good, note: 'a \uD800 b' }], ['with a field nobody knows', { ...good, state: 'offered' }],
  ])('an ask %s is refused, and nothing is kept', async (_what, body) => {
    await office.em().nativeUpdate(Cohort, { code: 'ASK-05' }, { open: true })
    const before = await office.em().count(BenchPlace)
    expect(await ask('ASK-05', body)).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
    expect(await office.em().count(BenchPlace)).toBe(before)
  })

  it('refuses an ask for a cohort that is not open, has begun, or never was', async () => {
    await office.cohort({ code: 'ASK-06', open: false })
    await office.cohort({ code: 'ASK-07', startsOn: '2026-03-26', endsOn: '2026-05-01' })
    expect(await ask('ASK-06', { ...good, email: 'wen.six@sallowbeck.example' })).toMatchObject({ status: 409, body: { code: 'cohort_not_open' } })
    expect(await ask('ASK-07', { ...good, email: 'wen.seven@sallowbeck.example' })).toMatchObject({ status: 409, body: { code: 'cohort_not_open' } })
    expect(await ask('NOT-99', { ...good, email: 'wen.none@sallowbeck.example' })).toMatchObject({ status: 404, body: { code: 'cohort_not_found' } })
  })

  it.each([['made up', 'A'.repeat(48)], ['too short', 'x'.repeat(20)], ['with NUL', `${'A'.repeat(30)}%00`]])('a link %s is nobody\'s', async (_what, token) => {
    expect(await api.nobody.get(`/api/place-links/${token}`)).toMatchObject({ status: 404, body: { code: 'place_link_unknown' } })
    expect(await api.nobody.post(`/api/place-links/${token}/open`)).toMatchObject({ status: 404, body: { code: 'place_link_unknown' } })
  })

  it('a link of the place next door, or one that was ended, does not open', async () => {
    await office.cohort({ code: 'ASK-08' })
    const place = await office.ask('ASK-08', 'Dele Door')
    const token = office.token(place)
    const other = office.token({ id: crypto.randomUUID(), linkVersion: 1 })
    expect((await api.nobody.get(`/api/place-links/${token.slice(0, 28)}${other.slice(28)}`)).status).toBe(404)
    await office.em().nativeUpdate(BenchPlace, { id: place.id }, { linkVersion: 2 })
    expect(await api.nobody.post(`/api/place-links/${token}/open`)).toMatchObject({ status: 404, body: { code: 'place_link_unknown' } })
  })
})

it('gives a hundred parallel asks for the last place numbers without gap or tie, in the order of the audit record', async () => {
  const round = await askRound({ url: api.url, em: office.em, app: harness.app, code: 'ASK-91', asks: 100, makeCohort: places => office.cohort({ code: 'ASK-91', places }) })
  expect(round).toEqual({ asked: 100, places: 8, taken: 8, newOnes: 1, waiting: 99, numbersWhole: true, auditInOrder: true, refused: [] })
}, 240_000)

it('dates an ask after the one before it, even where a clock was set back between them', async () => {
  await office.cohort({ code: 'ASK-11' })
  const first = await office.ask('ASK-11', 'Ann Ahead')
  const ahead = new Date(Date.now() + 5000)
  await office.em().nativeUpdate(BenchPlace, { id: first.id }, { createdAt: ahead })
  const second = await office.ask('ASK-11', 'Ben Behind')
  const [event] = await office.em().find(AuditEvent, { action: 'place-asked', subject: `place:${second.id}` })
  expect(event!.at.getTime()).toBe(ahead.getTime() + 1)
})

it('forgets asks of more than an hour ago', async () => {
  const old = new Date(Date.now() - 3_601_000)
  await office.em().transactional(async tx => void tx.persist(tx.create(AskTry, { subject: 'email:old@sallowbeck.example', at: old })))
  await passOffers(harness.app, null)
  expect(await office.em().count(AskTry, { subject: 'email:old@sallowbeck.example' })).toBe(0)
  expect(await office.em().count(AskTry)).toBeGreaterThan(0)
})

it('keeps number, audit event and message together: an ask that breaks half-way leaves none of them', async () => {
  const cohort = await office.cohort({ code: 'ASK-10' })
  await office.ask('ASK-10', 'Imre Ten')
  const broken = { ...harness.app, boss: { send: () => Promise.reject(new Error('the queue broke')) } as unknown as App['boss'] }
  await expect(askForPlace(office.em(), broken, 'ASK-10', { name: 'Wen Ten', email: 'wen.ten@sallowbeck.example', note: '' }, '10.8.8.8')).rejects.toThrow('the queue broke')
  await office.ask('ASK-10', 'Ruth Ten')
  const places = await office.em().find(BenchPlace, { cohort: cohort.id }, { orderBy: { listNumber: 'asc' } })
  expect(places.map(one => [one.name, one.listNumber])).toEqual([['Imre Ten', 1], ['Ruth Ten', 2]])
  const events = await office.em().find(AuditEvent, { action: 'place-asked', detail: { $like: '%ASK-10%' } }, { orderBy: { at: 'asc' } })
  expect(events.map(event => event.subject)).toEqual(places.map(place => `place:${place.id}`))
  expect((await office.mails('place-asked')).some(mail => mail.to === 'wen.ten@sallowbeck.example')).toBe(false)
  expect((await office.em().findOneOrFail(Cohort, cohort.id)).lastListNumber).toBe(2)
})
