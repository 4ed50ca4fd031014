import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Refund } from '#server/db/entities/Refund'
import { PurchaseOrder, Sponsor } from '#server/db/entities/Sponsor'
import { User } from '#server/db/entities/User'
import type { CohortRow, PlaceRow, PlaceView } from '#shared/contract/places'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
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

const view = async (place: Pick<BenchPlace, 'id'>) => (await desk.get<PlaceView>(`/api/places/${place.id}`)).body
const act = (place: Pick<BenchPlace, 'id'>, what: string, body: unknown, key?: string) => desk.post<PlaceView & { code?: string }>(`/api/places/${place.id}/${what}`, body, key)

/** Asked, opened, deposit paid by bank. */
async function booked(code: string, name: string): Promise<BenchPlace> {
  const place = await office.askAndOpen(code, name)
  await office.payDeposit(place)
  return office.again(place)
}

describe('cancelling', () => {
  it('shows the sum first, and gives back exactly what was shown', async () => {
    // 20 July 2026 is 63 days before 21 September: 56 days or more, so the deposit less 25.00 (handbook 5.4).
    await office.cohort({ code: 'DSK-01', startsOn: '2026-09-21' })
    const place = await booked('DSK-01', 'Osric Back')
    office.wait(60 * 24 * 60)
    const { body: quote } = await desk.get<{ back: { minor: number }, sum: string }>(`/api/places/${place.id}/refund-quote?cause=student`)
    expect(quote.back).toEqual({ minor: 32_500, currency: 'GBP' })
    expect(quote.sum).toContain('25.00')
    expect(await act(place, 'cancel', { cause: 'student', seenMinor: 35_000 })).toMatchObject({ status: 409, body: { code: 'refund_changed', quote: { back: { minor: 32_500 } } } })
    expect((await view(place)).state).toBe('deposit-paid')
    const cancelled = await act(place, 'cancel', { cause: 'student', seenMinor: 32_500, note: 'Rang on Monday.' })
    expect(cancelled).toMatchObject({ status: 200, body: { state: 'cancelled', slot: null, note: 'Rang on Monday.', refunds: [{ amount: { minor: 32_500, currency: 'GBP' }, state: 'decided' }] } })
    expect(cancelled.body.history.at(-1)?.what).toContain('Cancelled (by the student)')
    expect(cancelled.body.history.map(one => one.by)).toContain('Corin Ashdown')
  })

  it('cancels once: of two at the same moment one is told that the place stands elsewhere', async () => {
    await office.cohort({ code: 'DSK-02', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await booked('DSK-02', 'Nadia Once')
    const body = { cause: 'school', seenMinor: 35_000 }
    const [one, two] = await Promise.all([act(place, 'cancel', body), act(place, 'cancel', body)])
    expect([one.status, two.status].sort()).toEqual([200, 409])
    expect(await office.em().count(Refund, { place: place.id })).toBe(1)
  })

  it('gives the first answer again under the same key', async () => {
    await office.cohort({ code: 'DSK-03', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await booked('DSK-03', 'Tomek Key')
    const key = crypto.randomUUID()
    const first = await act(place, 'cancel', { cause: 'school', seenMinor: 35_000 }, key)
    const again = await act(place, 'cancel', { cause: 'school', seenMinor: 35_000 }, key)
    expect([first.status, again.status]).toEqual([200, 200])
    expect(again.body).toEqual(first.body)
  })

  it('lets who cancelled ask again for the same cohort, and have the same account', async () => {
    await office.cohort({ code: 'DSK-04', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const first = await booked('DSK-04', 'Ruth Returns')
    await act(first, 'cancel', { cause: 'school', seenMinor: 35_000 })
    const second = await booked('DSK-04', 'Ruth Returns')
    expect(second.id).not.toBe(first.id)
    expect(second).toMatchObject({ state: 'deposit-paid', listNumber: 2 })
    expect(second.person?.id).toBe((await office.again(first)).person?.id)
  })
})

describe('moving', () => {
  it('takes the money along by a pair of lines that sum to nothing, and frees the bench for the next', async () => {
    await office.cohort({ code: 'MOV-01', places: 1, startsOn: '2026-06-29', endsOn: '2026-09-24' })
    await office.cohort({ code: 'MOV-02', places: 2, startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await booked('MOV-01', 'Agnes Moves')
    await office.line(place, 'balance', 10_000)
    const next = await office.askAndOpen('MOV-01', 'Bettany Next')
    const moved = await act(place, 'move', { to: 'MOV-02', cause: 'student' })
    expect(moved).toMatchObject({ status: 201, body: { state: 'deposit-paid', slot: 1, paid: { minor: 45_000 }, due: { minor: 200_000 }, movedFrom: { id: place.id }, cohort: { code: 'MOV-02' } } })
    expect(moved.body.ledger.map(line => [line.kind, line.purpose, line.amount.minor]).sort()).toEqual([['moved-in', 'balance', 10_000], ['moved-in', 'deposit', 35_000]])
    expect(await view(place)).toMatchObject({ state: 'moved', slot: null, paid: { minor: 0 } })
    const lines = await office.em().find(LedgerLine, { kind: { $in: ['moved-in', 'moved-out'] }, reference: { $like: `move:${moved.body.id}:%` } })
    expect(lines.reduce((sum, line) => sum + line.amountMinor, 0)).toBe(0)
    expect((await office.again(next)).state).toBe('offered')
    const [mail] = (await office.mails('place-moved')).filter(one => one.to === emailOf('Agnes Moves'))
    expect(mail?.text).toContain('£450.00')
    expect(mail?.text).toContain('£2,000.00')
    // Moved once: the new place does not move again.
    await office.cohort({ code: 'MOV-03', startsOn: '2027-02-01', endsOn: '2027-04-29' })
    expect(await act(moved.body, 'move', { to: 'MOV-03' })).toMatchObject({ status: 409, body: { code: 'place_moved_once' } })
  })

  it('lets only one of two who are moved to the last place at once have it', async () => {
    await office.cohort({ code: 'MOV-04', startsOn: '2026-06-29', endsOn: '2026-09-24' })
    await office.cohort({ code: 'MOV-05', places: 1, startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const pair = [await booked('MOV-04', 'Imre Pair'), await booked('MOV-04', 'Wen Pair')]
    const second = await office.person('Second Admin', ['admin'])
    const other = await api.as(second)
    const [one, two] = await Promise.all([act(pair[0]!, 'move', { to: 'MOV-05' }), other.post<{ code: string }>(`/api/places/${pair[1]!.id}/move`, { to: 'MOV-05' })])
    expect([one.status, two.status].sort()).toEqual([201, 409])
    expect([one, two].find(answer => answer.status === 409)?.body.code).toBe('no_free_place')
    expect(await office.em().count(BenchPlace, { cohort: { code: 'MOV-05' } })).toBe(1)
    // Who stayed has place and money as before.
    const stayed = pair[one.status === 409 ? 0 : 1]!
    expect(await view(stayed)).toMatchObject({ state: 'deposit-paid', paid: { minor: 35_000 } })
  })

  it('moves in opposite directions at once without one waiting for the other for ever', async () => {
    await office.cohort({ code: 'MOV-06', startsOn: '2026-12-14', endsOn: '2027-03-11' })
    await office.cohort({ code: 'MOV-07', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const here = await booked('MOV-06', 'Joss Here')
    const there = await booked('MOV-07', 'Parveen There')
    const answers = await Promise.all([act(here, 'move', { to: 'MOV-07' }), act(there, 'move', { to: 'MOV-06' })])
    expect(answers.map(answer => answer.status)).toEqual([201, 201])
  })

  it('refuses a cohort that is full, unknown, the same, begun, or where somebody is already', async () => {
    await office.cohort({ code: 'MOV-08', startsOn: '2026-12-14', endsOn: '2027-03-11' })
    await office.cohort({ code: 'MOV-09', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    await office.cohort({ code: 'MOV-10', startsOn: '2026-01-05', endsOn: '2026-04-02' })
    const place = await booked('MOV-08', 'Freya Stays')
    await office.ask('MOV-09', 'Freya Stays')
    for (const [to, status, code] of [['MOV-99', 404, 'cohort_not_found'], ['MOV-08', 409, 'place_in_cohort'], ['MOV-10', 409, 'cohort_not_open'], ['MOV-09', 409, 'place_in_cohort']] as const) {
      expect(await act(place, 'move', { to }), to).toMatchObject({ status, body: { code } })
    }
    expect(await view(place)).toMatchObject({ state: 'deposit-paid', paid: { minor: 35_000 } })
    expect(await office.em().count(LedgerLine, { place: place.id })).toBe(1)
  })

  it('refuses what the rule does not let move', async () => {
    // Six days before the start, by the student's own wish: nothing may move (handbook 5.4). The clock stands at the end of May here.
    const today = harness.app.clock.schoolNow()
    const day = (days: number) => new Date(today.getTime() + days * 86_400_000).toISOString().slice(0, 10)
    await office.cohort({ code: 'MOV-11', startsOn: day(30), endsOn: day(118) })
    await office.cohort({ code: 'MOV-12', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await booked('MOV-11', 'Callum Late')
    office.wait(24 * 24 * 60)
    expect(await act(place, 'move', { to: 'MOV-12', cause: 'student' })).toMatchObject({ status: 409, body: { code: 'move_not_allowed' } })
    expect(await act(place, 'move', { to: 'MOV-12', cause: 'illness' })).toMatchObject({ status: 201 })
  })

  it('does not count the school\'s own move against the student', async () => {
    for (const [code, startsOn, endsOn] of [['MOV-15', '2026-12-21', '2027-03-18'], ['MOV-16', '2027-02-01', '2027-04-29'], ['MOV-17', '2027-06-21', '2027-09-18']] as const) await office.cohort({ code, startsOn, endsOn })
    const place = await booked('MOV-15', 'Ruth Twice')
    const bySchool = await act(place, 'move', { to: 'MOV-16', cause: 'school' })
    expect(bySchool).toMatchObject({ status: 201 })
    const own = await act(bySchool.body, 'move', { to: 'MOV-17', cause: 'student' })
    expect(own).toMatchObject({ status: 201, body: { paid: { minor: 35_000 } } })
    await office.cohort({ code: 'MOV-18', startsOn: '2027-10-04', endsOn: '2027-12-17' })
    expect(await act(own.body, 'move', { to: 'MOV-18', cause: 'student' })).toMatchObject({ status: 409, body: { code: 'place_moved_once' } })
  })

  it('moves somebody who falls ill after the start, once, with all the money', async () => {
    const today = harness.app.clock.schoolNow()
    const day = (days: number) => new Date(today.getTime() + days * 86_400_000).toISOString().slice(0, 10)
    await office.cohort({ code: 'MOV-13', startsOn: day(30), endsOn: day(118) })
    await office.cohort({ code: 'MOV-14', startsOn: '2027-06-21', endsOn: '2027-09-18' })
    const place = await booked('MOV-13', 'Wen Fellill')
    expect(await act(place, 'bank-payments', { purpose: 'balance', amountMinor: 210_000, reference: 'BANK 13', on: day(0) })).toMatchObject({ body: { state: 'confirmed' } })
    office.wait(31 * 24 * 60)
    expect(await act(place, 'steps', { step: 'here' })).toMatchObject({ status: 200, body: { state: 'here' } })
    expect(await act(place, 'move', { to: 'MOV-14', cause: 'student' })).toMatchObject({ status: 409, body: { code: 'move_not_allowed' } })
    expect(await act(place, 'move', { to: 'MOV-14', cause: 'illness' })).toMatchObject({ status: 201, body: { state: 'confirmed', paid: { minor: 245_000 } } })
    expect(await view(place)).toMatchObject({ state: 'moved', slot: null })
  })
})

describe('orders', () => {
  const order = { organisation: 'Hexley Row Rebuild Ltd', contact: 'Morag Stanyon', email: 'morag@hexley.example', number: 'HX-1', amountMinor: 245_000 }

  it('confirms a place from the order on, makes the account, and tells the sponsor', async () => {
    await office.cohort({ code: 'ORD-01', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await office.askAndOpen('ORD-01', 'Dele Ordered')
    const taken = await act(place, 'order', order)
    expect(taken).toMatchObject({ status: 201, body: { state: 'confirmed', slot: 1, sponsor: 'Hexley Row Rebuild Ltd', order: { number: 'HX-1', amount: { minor: 245_000 } } } })
    expect(await office.em().count(User, { email: emailOf('Dele Ordered') })).toBe(1)
    const mails = (await office.mails('order-received'))
    expect(mails.map(mail => [mail.to, mail.subject])).toEqual([['morag@hexley.example', 'Your order HX-1: a place is held for Dele Ordered']])
    expect(await office.em().count(User, { email: 'morag@hexley.example' })).toBe(0)
    const due = new Date((await office.em().findOneOrFail(PurchaseOrder, { place: place.id })).dueAt)
    expect(Math.round((due.getTime() - harness.app.clock.schoolNow().getTime()) / 86_400_000)).toBe(30)
    // The sponsor pays; the student's link asks for nothing.
    expect((await api.nobody.get(`/api/place-links/${office.token(place)}`)).body).toMatchObject({ doing: 'nothing', due: null })
    expect((await desk.get<{ items: { organisation: string }[] }>('/api/sponsors')).body.items.map(one => one.organisation)).toEqual(['Hexley Row Rebuild Ltd'])
  })

  it('refuses the same number twice, a second order for a place, one too small, and one for a place that ended', async () => {
    await office.cohort({ code: 'ORD-02', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const first = await office.askAndOpen('ORD-02', 'Wen Ordered')
    const second = await office.askAndOpen('ORD-02', 'Imre Ordered')
    expect(await act(first, 'order', { ...order, number: 'HX-2', amountMinor: 100 })).toMatchObject({ status: 422, body: { code: 'order_too_small' } })
    expect((await act(first, 'order', { ...order, number: 'HX-2' })).status).toBe(201)
    expect(await act(second, 'order', { ...order, number: 'HX-2' })).toMatchObject({ status: 409, body: { code: 'order_known' } })
    expect(await act(first, 'order', { ...order, number: 'HX-3' })).toMatchObject({ status: 409, body: { code: 'place_state' } })
    expect((await office.again(second)).state).toBe('offered')
    expect(await office.em().count(Sponsor, {})).toBe(1)
    await act(second, 'cancel', { cause: 'student', seenMinor: 0 })
    expect(await act(second, 'order', { ...order, number: 'HX-4' })).toMatchObject({ status: 409, body: { code: 'place_state' } })
  })

  it('finds no bench for an order where all are taken', async () => {
    await office.cohort({ code: 'ORD-03', places: 1, startsOn: '2026-12-21', endsOn: '2027-03-18' })
    await booked('ORD-03', 'Silas First')
    const waiting = await office.askAndOpen('ORD-03', 'Dele Waits')
    expect(await act(waiting, 'order', { ...order, number: 'HX-9' })).toMatchObject({ status: 409, body: { code: 'no_free_place' } })
    expect(await office.em().count(PurchaseOrder, { number: 'HX-9' })).toBe(0)
  })
})

describe('steps', () => {
  it('goes from confirmed to here to finished, with two years of the lessons', async () => {
    await office.cohort({ code: 'STP-01', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await booked('STP-01', 'Mateus Steps')
    expect(await act(place, 'steps', { step: 'here' })).toMatchObject({ status: 409, body: { code: 'place_state' } })
    expect(await act(place, 'bank-payments', { purpose: 'balance', amountMinor: 210_000, reference: 'STP 1', on: '2026-03-26' })).toMatchObject({ status: 201, body: { state: 'confirmed', due: null, steps: ['here'] } })
    expect(await act(place, 'steps', { step: 'here' })).toMatchObject({ status: 200, body: { state: 'here', steps: ['finish'] } })
    const finished = await act(place, 'steps', { step: 'finish' })
    expect(finished).toMatchObject({ status: 200, body: { state: 'finished', slot: null, steps: [] } })
    const row = await office.again(place)
    expect(row.accessUntil!.getUTCFullYear() - row.finishedAt!.getUTCFullYear()).toBe(2)
    expect((await office.em().find(AuditEvent, { subject: `place:${place.id}` })).map(event => event.action)).toEqual(expect.arrayContaining(['place-asked', 'place-opened', 'place-offered', 'place-deposit-paid', 'place-confirmed', 'place-here', 'place-finished']))
    expect((await office.em().find(AuditEvent, { subject: `place:${place.id}` })).some(event => event.detail.includes('mateus') || event.detail.includes('Mateus'))).toBe(false)
  })

  it('does not stop a place unseen where money would go back', async () => {
    await office.cohort({ code: 'STP-02', startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const place = await booked('STP-02', 'Tomek Stops')
    await act(place, 'bank-payments', { purpose: 'balance', amountMinor: 210_000, reference: 'STP 2', on: '2026-03-26' })
    await act(place, 'steps', { step: 'here' })
    // Stopping is no step of its own: the rule and the sum are seen first.
    expect(await act(place, 'steps', { step: 'stop' })).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
    const stopped = await act(place, 'cancel', { cause: 'unsafe-work', seenMinor: 0 })
    expect(stopped).toMatchObject({ status: 409, body: { code: 'refund_changed', quote: { back: { minor: expect.any(Number) } } } })
    const { quote } = stopped.body as unknown as { quote: { back: { minor: number } } }
    expect(await act(place, 'cancel', { cause: 'unsafe-work', seenMinor: quote.back.minor })).toMatchObject({ status: 200, body: { state: 'stopped' } })
  })
})

describe('cohorts', () => {
  const good = { code: 'DOR-27', name: 'Dorrow', startsOn: '2027-02-08', endsOn: '2027-05-06', pattern: 'evenings', places: 8, priceMinor: 245_000, depositMinor: 35_000, open: true }

  it('makes a cohort once and offers it to strangers', async () => {
    expect(await desk.post('/api/cohorts', good)).toMatchObject({ status: 201, body: { code: 'DOR-27', taken: 0, price: { minor: 245_000, currency: 'GBP' } } })
    expect(await desk.post('/api/cohorts', good)).toMatchObject({ status: 409, body: { code: 'cohort_known' } })
    const offer = await api.nobody.get<{ balanceDueOn: string, weeks: number, refundRules: unknown[], open: boolean }>('/api/cohorts/DOR-27/offer')
    // 28 days before 8 February 2027; 8 February to 6 May is 88 days, so 13 weeks.
    expect(offer.body).toMatchObject({ balanceDueOn: '2027-01-11', weeks: 13, open: true, placesLeft: 8 })
    expect(offer.body.refundRules.length).toBe(7)
    const courses = await api.nobody.get<{ items: { cohorts: CohortRow[] }[] }>('/api/courses')
    expect(courses.body.items[0]?.cohorts.map(one => one.code)).toContain('DOR-27')
  })

  it.each([
    ['that ends before it starts', { endsOn: '2027-01-01' }, 422, 'cohort_dates'], ['with a deposit over the price', { depositMinor: 300_000 }, 422, 'cohort_deposit'],
    ['on the 31st of February', { startsOn: '2027-02-31' }, 422, 'input_invalid'], ['with half a place', { places: 7.5 }, 422, 'input_invalid'], ['with 1e999 pence', { priceMinor: '1e999' }, 422, 'input_invalid'],
    ['with NUL in its name', { name: 'Dor\0row' }, 422, 'input_invalid'],
  ])('a cohort %s is refused, and not kept', async (_what, change, status, code) => {
    expect(await desk.post('/api/cohorts', { ...good, code: 'DOX-27', ...change })).toMatchObject({ status, body: { code } })
    expect((await desk.get<{ items: CohortRow[] }>('/api/cohorts')).body.items.map(one => one.code)).not.toContain('DOX-27')
  })

  it('keeps the benches that are taken, moves people to lower numbers, and gives new benches to the list', async () => {
    await office.cohort({ code: 'BEN-26', places: 3, startsOn: '2026-12-21', endsOn: '2027-03-18' })
    const first = await booked('BEN-26', 'Ann One')
    const second = await booked('BEN-26', 'Ben Two')
    const third = await booked('BEN-26', 'Cy Three')
    const waiting = await office.askAndOpen('BEN-26', 'Di Four')
    const change = (body: unknown) => desk.post('/api/cohorts/BEN-26', body)
    expect(await change({ places: 2 })).toMatchObject({ status: 409, body: { code: 'cohort_benches_taken' } })
    expect(await change({ places: 4 })).toMatchObject({ status: 200, body: { places: 4, taken: 4, waiting: 0 } })
    expect((await office.again(waiting)).state).toBe('offered')
    await act(first, 'cancel', { cause: 'school', seenMinor: 35_000 })
    expect(await change({ places: 3 })).toMatchObject({ status: 200, body: { places: 3, taken: 3 } })
    expect((await Promise.all([second, third, waiting].map(office.again))).map(place => place.slot).sort()).toEqual([1, 2, 3])
    expect(await change({ places: 3, code: 'XXX-26' })).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  })

  it('lists places by page, search, cohort and state', async () => {
    await office.cohort({ code: 'LST-26', places: 2, startsOn: '2026-12-21', endsOn: '2027-03-18' })
    for (const name of ['Ivo A_one', 'Ivo B%two', 'Ivo Cthree']) await office.askAndOpen('LST-26', name)
    const list = async (query: string) => (await desk.get<{ items: PlaceRow[], next: string | null }>(`/api/places?${query}`)).body
    const names: string[] = []
    let next: string | null = null
    do {
      const page = await list(`cohort=LST-26&sort=name&limit=1${next === null ? '' : `&after=${next}`}`)
      names.push(...page.items.map(one => one.name))
      next = page.next
    } while (next !== null)
    expect(names).toEqual(['Ivo A_one', 'Ivo B%two', 'Ivo Cthree'])
    expect((await list('cohort=LST-26&state=waiting-list')).items.map(one => one.name)).toEqual(['Ivo Cthree'])
    expect((await list('search=b%25two')).items.map(one => one.name)).toEqual(['Ivo B%two'])
    expect((await list('cohort=LST-26&sort=slot')).items.map(one => one.slot)).toEqual([1, 2, null])
    expect((await list('cohort=LST-26')).items.map(one => one.listNumber)).toEqual([3, 2, 1])
  })

  it.each(['after=e30', 'after=WyJcdTAwMDAiLCIwMDAwMDAwMC0wMDAwLTQwMDAtODAwMC0wMDAwMDAwMDAwMDAiXQ&sort=name', 'after=WyJzb29uIiwiMDAwMDAwMDAtMDAwMC00MDAwLTgwMDAtMDAwMDAwMDAwMDAwIl0', 'after=WyIxZTk5OSIsIjAwMDAwMDAwLTAwMDAtNDAwMC04MDAwLTAwMDAwMDAwMDAwMCJd&sort=slot'])('places asked with the page %s are refused', async (query) => {
    expect(await desk.get(`/api/places?${query}`)).toMatchObject({ status: 422, body: { code: 'page_unknown' } })
  })

  it.each(['cohort=%00', 'search=%00', 'state=%00', 'limit=0', 'sort=money'])('places asked with %s are refused', async (query) => {
    expect(await desk.get(`/api/places?${query}`)).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  })
})
