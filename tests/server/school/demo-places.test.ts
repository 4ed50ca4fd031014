import { afterAll, beforeAll, expect, it } from 'vitest'
import { createClock } from '#server/adapters/clock/clock'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { PurchaseOrder } from '#server/db/entities/Sponsor'
import { DemoSeeder } from '#server/db/seeders/DemoSeeder'
import { quoteRefund } from '#server/services/money/quote-refund'
import { askForPlace } from '#server/services/places/ask-for-place'
import { listCourses } from '#server/services/places/list-courses'
import { listPlaces } from '#server/services/places/list-places'
import { openPlace } from '#server/services/places/open-place'
import { placeToken } from '#server/services/places/place-link'
import { viewPlace } from '#server/services/places/view-place'
import { placesQuery } from '#shared/contract/places'
import { seedClips } from '../../../scripts/seed/seed-clips'
import { openHarness, type Harness } from '../harness'

let harness: Harness
const em = () => harness.app.orm.em.fork()
beforeAll(async () => {
  harness = await openHarness()
  await seedClips(em(), harness.app.storage, new Date('2025-09-01T00:00:00Z'))
  await new DemoSeeder().run(em(), { until: new Date('2026-03-26T19:40:00Z'), passwordHash: 'not a hash', seededAt: new Date() })
  const { schoolNow } = createClock({ demoNow: '2026-03-26T19:40:00Z', seededAt: new Date().toISOString() })
  harness.app.clock = { now: () => new Date(), schoolNow }
})
afterAll(() => harness?.close())

const placesOf = async (search: string) => (await listPlaces(em(), placesQuery.parse({ search, limit: 100 }))).items

it('offers Cinder alone, for 2,450.00 with 350.00 down, seven of eight places left', async () => {
  const [course] = await listCourses(em(), harness.app)
  // Handbook 5.1 and 5.4; 28 days before 21 September.
  expect(course?.cohorts).toMatchObject([{ code: 'CIN-26', price: { minor: 245_000, currency: 'GBP' }, deposit: { minor: 35_000 }, places: 8, placesLeft: 7, open: true, balanceDueOn: '2026-08-24', weeks: 13 }])
  expect(course?.cohorts[0]?.pattern).toContain('on site')
  expect(course?.modules).toHaveLength(7)
})

it('moved Agnes\'s deposit with her, and lets it move no second time', async () => {
  const places = await placesOf('agnes')
  expect(places.map(one => [one.cohort.code, one.state, one.paid.minor]).sort()).toEqual([['BRM-25', 'moved', 0], ['CIN-26', 'deposit-paid', 35_000]])
  const there = places.find(one => one.cohort.code === 'CIN-26')!
  expect(await viewPlace(em(), there.id)).toMatchObject({ movedFrom: { cohort: 'Bramble' }, due: { minor: 210_000 }, ledger: [{ kind: 'moved-in', amount: { minor: 35_000 } }] })
  expect((await quoteRefund(em(), harness.app, there, { cause: 'student' })).mayMove).toBe(false)
})

it('has Callum\'s balance late in two parts, and Dele\'s paid on his sponsor\'s order', async () => {
  const [callum] = await placesOf('callum')
  const late = await em().find(LedgerLine, { place: callum!.id, purpose: 'balance' }, { orderBy: { at: 'asc' } })
  // content/school/scenario.json: due 25 August, late twice, 28 August and 2 September.
  expect(late.map(line => line.at.toISOString().slice(0, 10))).toEqual(['2025-08-28', '2025-09-02'])
  expect(callum).toMatchObject({ state: 'finished', slot: null, due: null, paid: { minor: 245_000 } })
  const order = await em().findOneOrFail(PurchaseOrder, { number: 'HX-2207' }, { populate: ['sponsor', 'place'] })
  expect([order.sponsor.$.organisation, order.place.$.name, order.dueAt.toISOString().slice(0, 10)]).toEqual(['Hexley Row Rebuild Ltd', 'Dele Marchbank', '2026-01-07'])
})

it('owes and is owed nothing for who is here or has finished, and gives alumni two years', async () => {
  const places = await em().find(BenchPlace, { state: { $in: ['here', 'finished'] } })
  const rows = (await listPlaces(em(), placesQuery.parse({ limit: 100 }))).items.filter(one => one.state === 'here' || one.state === 'finished')
  expect(rows).toHaveLength(8 + 5 + 3)
  expect(rows.filter(one => one.due !== null || one.paid.minor !== 245_000)).toEqual([])
  for (const place of places.filter(one => one.state === 'finished')) expect(place.accessUntil!.getUTCFullYear() - place.finishedAt!.getUTCFullYear()).toBe(2)
  // Pairs of a move sum to nothing: the whole book holds sixteen prices and one deposit.
  const lines = await em().find(LedgerLine, {})
  expect(lines.reduce((sum, line) => sum + line.amountMinor, 0)).toBe(16 * 245_000 + 35_000)
})

it('lets the demo go on: a visitor asks Cinder and holds its second bench', async () => {
  await askForPlace(em(), harness.app, 'CIN-26', { name: 'Somebody New', email: 'somebody@sallowbeck.example', note: '' }, '10.0.0.1')
  const place = await em().findOneOrFail(BenchPlace, { email: 'somebody@sallowbeck.example' })
  await openPlace(em(), harness.app, placeToken(harness.app, place))
  expect(await em().findOneOrFail(BenchPlace, place.id)).toMatchObject({ state: 'offered', slot: 2, listNumber: 1 })
})
