import { afterAll, beforeAll, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Mail } from '#server/db/entities/Mail'
import { Payment } from '#server/db/entities/Payment'
import { User } from '#server/db/entities/User'
import { cancelPlace } from '#server/services/places/cancel-place'
import { passOffer } from '#server/services/places/pass-offer'
import { passOffers } from '#server/services/places/pass-offers'
import { takePlaceStep } from '#server/services/places/take-place-step'
import { viewLinkedPlace } from '#server/services/places/view-linked-place'
import type { PlaceLinkView } from '#shared/contract/places'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api } from '../http'
import { emailOf, openOffice, type TestOffice } from './office'

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

const hour = 60
const states = async (code: string) => (await office.em().find(BenchPlace, { cohort: { code } }, { orderBy: { createdAt: 'asc' } })).map(place => [place.name.split(' ')[1], place.state, place.slot])
const link = (place: BenchPlace): Promise<PlaceLinkView> => viewLinkedPlace(office.em(), harness.app, office.token(place))

/** One bench, held by the first; the others wait in the order named. */
async function oneBench(code: string, names: readonly string[]): Promise<BenchPlace[]> {
  await office.cohort({ code, places: 1 })
  const places: BenchPlace[] = []
  for (const name of names) places.push(await office.askAndOpen(code, `${code} ${name}`))
  return places
}

it('holds the place for 30 minutes from opening, and gives the next to open a turn on the list', async () => {
  const [first, second] = await oneBench('OFF-01', ['A', 'B'])
  expect(first).toMatchObject({ state: 'offered', slot: 1 })
  expect(first!.heldUntil!.getTime() - harness.app.clock.schoolNow().getTime()).toBeGreaterThan(29 * 60_000)
  expect(first!.heldUntil!.getTime() - harness.app.clock.schoolNow().getTime()).toBeLessThanOrEqual(30 * 60_000)
  expect(second).toMatchObject({ state: 'waiting-list', slot: null })
  expect(await link(first!)).toMatchObject({ doing: 'pay-deposit', due: { minor: 35_000, currency: 'GBP' }, turn: null, cohort: { placesLeft: 0, waiting: 1 } })
  expect(await link(second!)).toMatchObject({ doing: 'wait', turn: 1, due: null })
  // Opening again changes nothing.
  expect((await office.open(first!)).heldUntil).toEqual(first!.heldUntil)
})

it('lets a hold run out, offers the bench to the next for 48 hours by e-mail, and keeps the turn of who let it go', async () => {
  const [first, second, third] = await oneBench('OFF-02', ['A', 'B', 'C'])
  office.wait(31)
  await passOffers(harness.app, null)
  expect(await states('OFF-02')).toEqual([['A', 'waiting-list', null], ['B', 'offered', 1], ['C', 'waiting-list', null]])
  const offers = (await office.mails('waiting-list-offer')).filter(mail => mail.to === emailOf('OFF-02 B'))
  expect(offers).toHaveLength(1)
  expect(offers[0]!.text).toContain(office.token(second!))
  expect(offers[0]!.text).toContain('you keep your turn')
  // A was asked once already, so C comes first; A keeps number 1.
  expect((await link(third!)).turn).toBe(1)
  expect((await link(first!)).turn).toBe(2)
  expect((await office.again(first!)).listNumber).toBe(1)
  office.wait(47 * hour)
  await passOffers(harness.app, null)
  expect((await office.again(second!)).state).toBe('offered')
  office.wait(1 * hour + 1)
  await passOffers(harness.app, null)
  expect(await states('OFF-02')).toEqual([['A', 'waiting-list', null], ['B', 'waiting-list', null], ['C', 'offered', 1]])
  // Once more round: everybody had one offer, so nobody is offered this bench again and anybody may have it.
  await passOffer(office.em(), harness.app, office.token(third!))
  expect((await states('OFF-02')).map(([, state]) => state)).toEqual(['waiting-list', 'waiting-list', 'waiting-list'])
  expect(await office.askAndOpen('OFF-02', 'OFF-02 D')).toMatchObject({ state: 'offered', slot: 1 })
})

it('asks the whole list again, from its top, when a bench comes free by itself', async () => {
  const [holder, first, second] = await oneBench('OFF-03', ['A', 'B', 'C'])
  await office.payDeposit(holder!)
  await cancelPlace(office.em(), harness.app, office.corin, holder!.id, { cause: 'student', seenMinor: 35_000, note: '' })
  expect((await office.again(first!)).state).toBe('offered')
  await passOffer(office.em(), harness.app, office.token(first!))
  expect(await office.again(first!)).toMatchObject({ state: 'waiting-list', offersLetGo: 1 })
  const taken = await office.again(second!)
  expect(taken.state).toBe('offered')
  await office.payDeposit(taken)
  await cancelPlace(office.em(), harness.app, office.corin, second!.id, { cause: 'school', seenMinor: 35_000, note: '' })
  expect(await office.again(first!)).toMatchObject({ state: 'offered', slot: 1 })
})

it('gives a free bench to who waits before a newcomer', async () => {
  const [, second] = await oneBench('OFF-04', ['A', 'B'])
  office.wait(31)
  // No job has run: the newcomer's own opening passes the bench on, and finds it gone.
  const newcomer = await office.askAndOpen('OFF-04', 'OFF-04 C')
  expect(newcomer.state).toBe('waiting-list')
  expect((await office.again(second!)).state).toBe('offered')
})

it('keeps one open offer an address, whichever cohort', async () => {
  await office.cohort({ code: 'OFF-05', places: 2 })
  await office.cohort({ code: 'OFF-06', places: 2 })
  const first = await office.askAndOpen('OFF-05', 'Same Person')
  expect(first.state).toBe('offered')
  const second = await office.ask('OFF-06', 'Same Person')
  expect(await api.nobody.post(`/api/place-links/${office.token(second)}/open`)).toMatchObject({ status: 409, body: { code: 'offer_open' } })
  expect((await office.again(second)).state).toBe('asked')
  // On the list of the other cohort the turn waits, and goes to the next meanwhile.
  await passOffer(office.em(), harness.app, office.token(first))
  expect((await office.open(second)).state).toBe('offered')
})

it('passes over somebody who holds an offer elsewhere, without costing the turn', async () => {
  const [holder, busy, next] = await oneBench('OFF-07', ['A', 'B', 'C'])
  await office.cohort({ code: 'OFF-08', places: 2 })
  expect((await office.askAndOpen('OFF-08', 'OFF-07 B')).state).toBe('offered')
  await passOffer(office.em(), harness.app, office.token(holder!))
  expect(await office.again(busy!)).toMatchObject({ state: 'waiting-list', offersLetGo: 0 })
  expect((await office.again(next!)).state).toBe('offered')
})

it('holds for 48 hours from the offer once paying is begun, and says so once', async () => {
  const [first] = await oneBench('OFF-09', ['A'])
  const opened = first!.offeredAt!.getTime()
  const begin = () => api.nobody.post<{ url: string }>(`/api/place-links/${office.token(first!)}/pay`, { purpose: 'deposit' })
  const begun = await begin()
  expect(begun.status).toBe(200)
  expect(begun.body.url).toMatch(/^http/)
  expect((await begin()).body.url).toBe(begun.body.url)
  expect((await office.again(first!)).heldUntil!.getTime()).toBe(opened + 48 * 3_600_000)
  const mails = (await office.mails('place-held')).filter(mail => mail.to === emailOf('OFF-09 A'))
  expect(mails).toHaveLength(1)
  expect(mails[0]!.subject).toMatch(/^A bench place is held for you until \d\d:\d\d on \w+day \d+ March$/)
  expect(mails[0]!.text).toContain('£350.00')
  expect(await link(first!)).toMatchObject({ payingSince: expect.any(String) })
})

it('begins no payment for a hold that ran out, for the waiting list or for somebody else', async () => {
  const [first, second] = await oneBench('OFF-10', ['A', 'B'])
  const pay = (place: BenchPlace, purpose: string) => api.nobody.post(`/api/place-links/${office.token(place)}/pay`, { purpose })
  expect(await pay(second!, 'deposit')).toMatchObject({ status: 409, body: { code: 'hold_ran_out' } })
  expect(await pay(first!, 'balance')).toMatchObject({ status: 409 })
  expect(await pay(first!, 'everything')).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  office.wait(31)
  expect(await pay(first!, 'deposit')).toMatchObject({ status: 409, body: { code: 'hold_ran_out' } })
  expect(await office.em().count(Payment, { place: { $in: [first!.id, second!.id] } })).toBe(0)
})

it('books the place with the deposit and makes the account by invitation, once', async () => {
  const [first] = await oneBench('OFF-11', ['A'])
  expect(await office.payDeposit(first!)).toBe('booked')
  const booked = await office.again(first!)
  expect(booked).toMatchObject({ state: 'deposit-paid', slot: 1, heldUntil: null })
  const user = await office.em().findOneOrFail(User, { email: emailOf('OFF-11 A') })
  expect(user).toMatchObject({ name: 'OFF-11 A', roles: ['student'], passwordHash: null })
  expect(booked.person?.id).toBe(user.id)
  expect((await office.mails('invitation')).filter(mail => mail.to === user.email)).toHaveLength(1)
  expect(await office.payDeposit(first!, 1)).toBe('booked')
  expect((await office.mails('invitation')).filter(mail => mail.to === user.email)).toHaveLength(1)
  expect(await link(first!)).toMatchObject({ doing: 'pay-balance', due: { minor: 245_000 - 35_001, currency: 'GBP' }, hasAccount: true })
})

it('links the account somebody has already, and makes them a student beside what they are', async () => {
  const marit = await office.person('Marit Garsdale', ['instructor'])
  await office.cohort({ code: 'OFF-12' })
  const place = await office.askAndOpen('OFF-12', 'Marit Garsdale')
  await office.payDeposit(place)
  expect((await office.again(place)).person?.id).toBe(marit.id)
  expect((await office.em().findOneOrFail(User, marit.id)).roles).toEqual(['instructor', 'student'])
  expect((await office.mails('invitation')).filter(mail => mail.to === marit.email)).toHaveLength(0)
})

it('takes the place again when it is paid after the hold ran out and the bench is still free', async () => {
  const [first] = await oneBench('OFF-13', ['A'])
  office.wait(31)
  await passOffers(harness.app, null)
  expect((await office.again(first!)).state).toBe('waiting-list')
  expect(await office.payDeposit(first!)).toBe('booked')
  expect(await office.again(first!)).toMatchObject({ state: 'deposit-paid', slot: 1 })
})

it('says there is no place for a deposit that comes when the bench is somebody else\'s, and keeps the turn', async () => {
  const [first, second] = await oneBench('OFF-14', ['A', 'B'])
  office.wait(31)
  await passOffers(harness.app, null)
  expect(await office.payDeposit(first!)).toBe('no-place')
  expect(await office.again(first!)).toMatchObject({ state: 'waiting-list', slot: null, person: null })
  expect((await office.again(second!)).state).toBe('offered')
})

it('offers nothing any more once the cohort has begun', async () => {
  await office.cohort({ code: 'OFF-15', places: 1, startsOn: '2026-04-20', endsOn: '2026-07-01' })
  const first = await office.askAndOpen('OFF-15', 'OFF-15 A')
  const second = await office.askAndOpen('OFF-15', 'OFF-15 B')
  await office.payDeposit(first)
  office.wait(40 * 24 * hour)
  const quote = await api.as(office.corin).then(admin => admin.get<{ back: { minor: number } }>(`/api/places/${first.id}/refund-quote`))
  await cancelPlace(office.em(), harness.app, office.corin, first.id, { cause: 'student', seenMinor: quote.body.back.minor, note: '' })
  expect((await office.again(second)).state).toBe('waiting-list')
  expect(await api.nobody.post(`/api/place-links/${office.token(second)}/open`)).toMatchObject({ status: 200, body: { state: 'waiting-list' } })
})

it('lets the office offer a bench out of turn and take the offer back', async () => {
  const [holder, second] = await oneBench('OFF-16', ['A', 'B'])
  const step = (place: BenchPlace, name: 'offer' | 'withdraw-offer' | 'here') => takePlaceStep(office.em(), harness.app, office.corin, place.id, { step: name, note: '' })
  await expect(step(second!, 'offer')).rejects.toMatchObject({ code: 'no_free_place', status: 409 })
  await expect(step(second!, 'here')).rejects.toMatchObject({ code: 'place_state', status: 409 })
  await step(holder!, 'withdraw-offer')
  expect((await office.again(holder!)).state).toBe('waiting-list')
  expect((await office.again(second!)).state).toBe('offered')
})

it('writes the message of an offer once, however often the job runs', async () => {
  const [holder, second] = await oneBench('OFF-17', ['A', 'B'])
  await passOffer(office.em(), harness.app, office.token(holder!))
  await Promise.all([1, 2, 3].map(() => passOffers(harness.app, null)))
  expect(await office.em().count(Mail, { template: 'waiting-list-offer', to: second!.email })).toBe(1)
})

it('refuses to let go what is not offered', async () => {
  const [, second] = await oneBench('OFF-18', ['A', 'B'])
  expect(await api.nobody.post(`/api/place-links/${office.token(second!)}/pass`)).toMatchObject({ status: 409, body: { code: 'place_state' } })
})
