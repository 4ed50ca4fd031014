import { createHmac } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Payment } from '#server/db/entities/Payment'
import { PaymentEvent } from '#server/db/entities/PaymentEvent'
import { Receipt } from '#server/db/entities/Receipt'
import { Refund } from '#server/db/entities/Refund'
import { applyPayment } from '#server/services/money/apply-payment'
import { beginPayment } from '#server/services/money/begin-payment'
import { sweepPayments } from '#server/services/money/sweep-payments'
import { takeBankPayment } from '#server/services/money/take-bank-payment'
import { placeToken, readPlaceToken } from '#server/services/places/place-link'
import { schoolDay } from '#shared/contract/school-day'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api } from '../http'
import { makeMoneySchool, type MoneySchool } from './money-school'
import { runJobs } from './run-jobs'

let harness: Harness, api: Api, school: MoneySchool
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeMoneySchool(harness, { places: 60 })
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})
beforeEach(async () => {
  // Work of the tests before this one would only make it slow.
  await school.em().getConnection().execute('delete from pgboss.job where name = \'apply-payment\'')
  Object.assign(harness.pay.faults, { api429Next: 0, api500Next: 0, responseLostNext: 0, slowMs: 0 })
})

const begin = (place: Pick<BenchPlace, 'id'>, purpose: 'deposit' | 'balance' | 'renewal' = 'deposit') => beginPayment(school.em(), harness.app, place.id, purpose)
const press = (url: string, button: string) => fetch(`${url}/${button}`, { method: 'POST', redirect: 'manual' })
const linesOf = (place: Pick<BenchPlace, 'id'>) => school.em().find(LedgerLine, { place: place.id }, { orderBy: { amountMinor: 'desc' } })
const receiptsOf = (place: Pick<BenchPlace, 'id'>) => school.em().count(Receipt, { line: { place: place.id } })
const paymentsOf = (place: Pick<BenchPlace, 'id'>) => school.em().find(Payment, { place: place.id }, { orderBy: { createdAt: 'asc' } })
const change = (place: Pick<BenchPlace, 'id'>, what: Partial<Pick<BenchPlace, 'state' | 'slot' | 'heldUntil' | 'accessUntil' | 'linkVersion' | 'email'>>) => school.em().nativeUpdate(BenchPlace, { id: place.id }, what)
const sessions = () => harness.pay.store.all('sessions').length
const events = (about: string) => harness.pay.store.all('events').filter(one => JSON.stringify(one.data).includes(about))

/** A message as the processor sends it: signed over the bytes with the documented scheme, reckoned here on its own. */
function signed(body: string, { secret = harness.config.pay.webhookSecret, at = new Date() } = {}): Record<string, string> {
  const seconds = Math.floor(at.getTime() / 1000)
  return { 'stripe-signature': `t=${seconds},v1=${createHmac('sha256', secret).update(`${seconds}.${body}`).digest('hex')}` }
}
const hook = (body: string, headers: Record<string, string>) => api.nobody.call('POST', '/api/payments/webhook', body, headers)
const jobsFor = async (paymentId: string) => (await school.em().getConnection().execute<{ n: number }[]>('select count(*)::int as n from pgboss.job where name = \'apply-payment\' and data ->> \'paymentId\' = ?', [paymentId]))[0]?.n

describe('beginning to pay', () => {
  it('opens one page for what is due, and the same page when asked again or by two at once', async () => {
    const place = await school.held()
    const before = sessions()
    const [first, second, third] = await Promise.all([begin(place), begin(place), begin(place)])
    expect(new Set([first?.url, second?.url, third?.url, (await begin(place)).url]).size).toBe(1)
    expect(sessions() - before).toBe(1)
    // Deposit: handbook 5.4.
    expect(await paymentsOf(place)).toMatchObject([{ state: 'open', purpose: 'deposit', amountMinor: 35_000, currency: 'GBP' }])
    expect(harness.pay.store.all('sessions').at(-1)).toMatchObject({ amount_total: 35_000, currency: 'gbp', customer_email: place.email, success_url: expect.stringMatching(/\/place\/[\w-]{48}\?paid=1$/) })
  })
  it('gives the page no longer than the place is held, nor less than the processor allows', async () => {
    const soon = await school.held()
    await change(soon, { heldUntil: new Date(harness.app.clock.schoolNow().getTime() + 2 * 3_600_000) })
    await begin(soon)
    const at = (session: { expires_at: number } | undefined) => (session?.expires_at ?? 0) * 1000 - Date.now()
    expect(at(harness.pay.store.all('sessions').at(-1)) / 60_000).toBeCloseTo(120, 0)
    const late = await school.held()
    await change(late, { heldUntil: new Date(harness.app.clock.schoolNow().getTime() + 60_000) })
    await begin(late)
    expect(at(harness.pay.store.all('sessions').at(-1)) / 60_000).toBeCloseTo(31, 0)
  })
  it('refuses where nothing is due or nothing is held', async () => {
    const booked = await school.booked()
    await expect(begin(booked)).rejects.toMatchObject({ code: 'nothing_to_pay', status: 409 })
    await expect(begin(booked, 'renewal')).rejects.toMatchObject({ code: 'place_state' })
    await school.pay(booked, 'balance')
    await expect(begin(booked, 'balance')).rejects.toMatchObject({ code: 'nothing_to_pay' })
    const lapsed = await school.held()
    await change(lapsed, { heldUntil: new Date(harness.app.clock.schoolNow().getTime() - 1000) })
    await expect(begin(lapsed)).rejects.toMatchObject({ code: 'hold_ran_out' })
    await change(lapsed, { state: 'waiting-list', slot: null })
    await expect(begin(lapsed)).rejects.toMatchObject({ code: 'hold_ran_out' })
    await expect(begin(lapsed, 'balance')).rejects.toMatchObject({ code: 'place_state' })
    await expect(begin({ id: crypto.randomUUID() })).rejects.toMatchObject({ code: 'place_not_found' })
    expect(await paymentsOf(lapsed)).toEqual([])
  })
  it('opens one page though the processor is busy, broken and its answer lost', async () => {
    const place = await school.held()
    const before = sessions()
    Object.assign(harness.pay.faults, { api429Next: 2, api500Next: 1, responseLostNext: 1 })
    await begin(place)
    expect(sessions() - before).toBe(1)
    expect(await paymentsOf(place)).toMatchObject([{ state: 'open' }])
  })
  it('says that the processor does not answer, keeps its row, and goes on with the same one later', async () => {
    const place = await school.held()
    harness.pay.faults.api500Next = 20
    await expect(begin(place)).rejects.toMatchObject({ code: 'payments_unreachable' })
    expect(await paymentsOf(place)).toMatchObject([{ state: 'begun', sessionId: null }])
    harness.pay.faults.api500Next = 0
    await begin(place)
    expect(await paymentsOf(place)).toMatchObject([{ state: 'open' }])
  })
  it('finds the page whose answer was lost before the asker changed address', async () => {
    const place = await school.held()
    const before = sessions()
    // Done three times over, and nobody hears: the process might as well have been killed.
    harness.pay.faults.responseLostNext = 3
    await expect(begin(place)).rejects.toMatchObject({ code: 'payments_unreachable' })
    await change(place, { email: `moved.${place.email}` })
    await begin(place)
    expect(sessions() - before).toBe(1)
    expect(await paymentsOf(place)).toMatchObject([{ state: 'open' }])
  })
  it('shuts a page whose sum is old before it opens another', async () => {
    const place = await school.booked()
    const first = await begin(place, 'balance')
    await takeBankPayment(school.em(), harness.app, school.corin, place.id, { purpose: 'balance', amountMinor: 10_000, reference: `part ${place.id}`, on: schoolDay(harness.app.clock.schoolNow()) })
    const second = await begin(place, 'balance')
    expect(second.url).not.toBe(first.url)
    expect((await paymentsOf(place)).map(one => [one.purpose, one.state, one.amountMinor])).toEqual([['deposit', 'paid', 35_000], ['balance', 'expired', 210_000], ['balance', 'open', 200_000]])
    expect(await (await fetch(first.url)).text()).toContain('has expired')
  })
  it('does not run inside a transaction, where its row could be undone after the page is open', async () => {
    const place = await school.held()
    await expect(school.em().transactional(tx => beginPayment(tx, harness.app, place.id, 'deposit'))).rejects.toThrow(/inside a transaction/)
  })
})

describe('a payment', () => {
  it('that was declined and then paid books the place once, with one line and one receipt', async () => {
    const place = await school.held()
    const { url } = await begin(place)
    await press(url, 'declined')
    await press(url, 'insufficient')
    const [payment] = await paymentsOf(place)
    await applyPayment(harness.app, payment?.id ?? '')
    expect([(await school.now(place)).state, await linesOf(place), (await paymentsOf(place))[0]?.state]).toEqual(['offered', [], 'open'])
    await press(url, 'pay')
    await Promise.all(Array.from({ length: 6 }, () => applyPayment(harness.app, payment?.id ?? '')))
    await applyPayment(harness.app, payment?.id ?? '')
    expect(await linesOf(place)).toMatchObject([{ kind: 'card', purpose: 'deposit', amountMinor: 35_000, currency: 'GBP' }])
    expect(await receiptsOf(place)).toBe(1)
    expect(await school.now(place)).toMatchObject({ state: 'deposit-paid', heldUntil: null })
    expect(await paymentsOf(place)).toMatchObject([{ state: 'paid', url: null }])
  })
  it('of the balance confirms the place', async () => {
    const place = await school.booked()
    await school.pay(place, 'balance')
    expect((await linesOf(place)).map(line => line.amountMinor)).toEqual([210_000, 35_000])
    expect((await school.now(place)).state).toBe('confirmed')
    expect(await receiptsOf(place)).toBe(2)
  })
  it('for another year moves the end of access by a year, from today when it has passed', async () => {
    const place = await school.booked()
    await change(place, { state: 'finished', slot: null, accessUntil: new Date('2030-02-28T12:00:00Z') })
    await school.pay(place, 'renewal')
    expect((await school.now(place)).accessUntil?.toISOString()).toBe('2031-02-28T12:00:00.000Z')
    await change(place, { accessUntil: new Date('2020-01-01T12:00:00Z') })
    // Handbook 5.4: 40.00 a year.
    expect(await school.pay(place, 'renewal')).toMatchObject({ amountMinor: 4_000 })
    const years = ((await school.now(place)).accessUntil?.getTime() ?? 0) - harness.app.clock.schoolNow().getTime()
    expect(years / 86_400_000).toBeGreaterThan(364.9)
    expect(years / 86_400_000).toBeLessThan(366.1)
  })
  it('for a place that is gone goes back whole, by itself, and says so', async () => {
    const place = await school.held()
    const { url } = await begin(place)
    await change(place, { state: 'cancelled', slot: null, heldUntil: null })
    await press(url, 'pay')
    const [payment] = await paymentsOf(place)
    await applyPayment(harness.app, payment?.id ?? '')
    expect(await school.em().find(Refund, { place: place.id })).toMatchObject([{ rule: 'place-gone', amountMinor: 35_000, state: 'decided', decidedBy: null }])
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    await applyPayment(harness.app, payment?.id ?? '')
    expect((await linesOf(place)).map(line => [line.kind, line.amountMinor])).toEqual([['card', 35_000], ['card-refund', -35_000]])
    expect((await school.now(place)).state).toBe('cancelled')
  })
  it('of a deposit that a transfer had paid meanwhile goes back whole', async () => {
    const place = await school.held()
    const { url } = await begin(place)
    await takeBankPayment(school.em(), harness.app, school.corin, place.id, { purpose: 'deposit', amountMinor: 35_000, reference: `first ${place.id}`, on: schoolDay(harness.app.clock.schoolNow()) })
    expect((await school.now(place)).state).toBe('deposit-paid')
    await press(url, 'pay')
    await applyPayment(harness.app, (await paymentsOf(place))[0]?.id ?? '')
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect((await linesOf(place)).map(line => [line.kind, line.amountMinor])).toEqual([['bank', 35_000], ['card', 35_000], ['card-refund', -35_000]].sort((a, b) => Number(b[1]) - Number(a[1])))
    expect(await school.em().find(Refund, { place: place.id })).toMatchObject([{ rule: 'paid-twice', state: 'sent' }])
  })
  it('that somebody gave back at the processor by hand is written down as what it is', async () => {
    const place = await school.booked()
    const [line] = await linesOf(place)
    await harness.app.payments.refund({ chargeId: line?.reference, amountMinor: 1_000, key: `by hand ${place.id}`, reference: 'nothing of ours' })
    await applyPayment(harness.app, (await paymentsOf(place))[0]?.id ?? '')
    await applyPayment(harness.app, (await paymentsOf(place))[0]?.id ?? '')
    expect((await linesOf(place)).map(one => [one.kind, one.amountMinor, one.refund])).toEqual([['card', 35_000, null], ['card-refund', -1_000, null]])
  })
  it('stands in the ledger by the school\'s own clock, which the refund rule counts in', async () => {
    const own = await openHarness()
    try {
      own.app.clock = { now: () => new Date(), schoolNow: () => new Date(Date.now() - 100 * 86_400_000) }
      const away = await makeMoneySchool(own)
      const line = await away.pay(await away.held())
      expect((own.app.clock.schoolNow().getTime() - line.at.getTime()) / 60_000).toBeLessThan(2)
      expect(line.at.getTime()).toBeLessThan(Date.now() - 99 * 86_400_000)
    }
    finally {
      await own.close()
    }
  })
})

describe('the processor\'s messages', () => {
  async function paid(): Promise<{ place: BenchPlace, payment: Payment, bodies: string[] }> {
    const place = await school.held()
    await press((await begin(place)).url, 'pay')
    const [payment] = await paymentsOf(place)
    if (!payment) throw new Error('no payment')
    return { place, payment, bodies: events(payment.id).map(event => JSON.stringify(event)) }
  }

  it('are kept once with the work that follows, in any order and however often they come', async () => {
    const { place, payment, bodies } = await paid()
    expect(bodies).toHaveLength(3)
    for (const body of [...bodies].reverse()) expect((await hook(body, signed(body))).status).toBe(200)
    expect(await jobsFor(payment.id)).toBe(3)
    // Replayed, alone and at once.
    for (const body of bodies) expect((await hook(body, signed(body))).status).toBe(200)
    await Promise.all(bodies.map(body => hook(body, signed(body))))
    expect(await jobsFor(payment.id)).toBe(3)
    await runJobs(harness.app, 'apply-payment')
    expect((await linesOf(place)).map(line => line.amountMinor)).toEqual([35_000])
    expect((await school.now(place)).state).toBe('deposit-paid')
    expect(await receiptsOf(place)).toBe(1)
  })
  it('are refused with a wrong signature, none, or another\'s secret, and nothing is kept', async () => {
    const { payment, bodies: [body = ''] } = await paid()
    for (const headers of [{ 'stripe-signature': 't=1,v1=00' }, { 'stripe-signature': 'nonsense' }, {}, signed(body, { secret: 'whsec_of_somebody_else' })]) {
      expect(await hook(body, headers as Record<string, string>)).toMatchObject({ status: 400, body: { code: 'signature_invalid' } })
    }
    expect([await jobsFor(payment.id), await school.em().count(PaymentEvent, { id: (JSON.parse(body) as { id: string }).id })]).toEqual([0, 0])
  })
  it('are refused with one byte changed', async () => {
    const { payment, bodies: [body = ''] } = await paid()
    const headers = signed(body)
    expect(await hook(body.replace('35000', '35001'), headers)).toMatchObject({ status: 400, body: { code: 'signature_invalid' } })
    expect(await hook(`${body} `, headers)).toMatchObject({ status: 400 })
    expect(await jobsFor(payment.id)).toBe(0)
    expect((await hook(body, headers)).status).toBe(200)
  })
  it('are refused with an old timestamp', async () => {
    const { bodies: [body = ''] } = await paid()
    // The SDK's tolerance: 300 seconds.
    expect(await hook(body, signed(body, { at: new Date(Date.now() - 310_000) }))).toMatchObject({ status: 400, body: { code: 'signature_invalid' } })
    expect((await hook(body, signed(body, { at: new Date(Date.now() - 290_000) }))).status).toBe(200)
  })
  it('of a kind nobody knows, or about nothing of ours, are kept and nothing follows', async () => {
    const body = JSON.stringify({ id: `evt_${crypto.randomUUID()}`, object: 'event', api_version: '2026-10-28.endive', created: Math.floor(Date.now() / 1000), type: 'moon.full', data: { object: { id: 'moon_1', object: 'moon' } } })
    const before = await school.em().getConnection().execute('select count(*)::int as n from pgboss.job')
    expect((await hook(body, signed(body))).status).toBe(200)
    expect(await school.em().findOneOrFail(PaymentEvent, { id: (JSON.parse(body) as { id: string }).id })).toMatchObject({ type: 'moon.full', about: null })
    expect(await school.em().getConnection().execute('select count(*)::int as n from pgboss.job')).toEqual(before)
  })
  it('that are signed and no event are refused, and so is a body without end', async () => {
    for (const body of ['not json', '[]', '{}', '"x"']) expect(await hook(body, signed(body)), body).toMatchObject({ status: 400, body: { code: 'body_not_json' } })
    expect((await hook('x'.repeat(300_000), {})).status).toBe(413)
  })
  it('go on their way by themselves: paid at the page, booked by the worker', async () => {
    harness.pay.tell(`${api.url}/api/payments/webhook`)
    try {
      const { place, payment } = await paid()
      for (let n = 0; n < 100 && (await jobsFor(payment.id) ?? 0) < 3; n += 1) await new Promise(resolve => setTimeout(resolve, 30))
      await runJobs(harness.app, 'apply-payment')
      expect((await school.now(place)).state).toBe('deposit-paid')
    }
    finally {
      harness.pay.tell(null)
    }
  })
})

describe('coming back from the page', () => {
  const returned = (token: string) => api.nobody.post('/api/payments/returned', { token })
  it('looks at once how the payment stands, before any message', async () => {
    const place = await school.held()
    const { url } = await begin(place)
    expect((await returned(placeToken(harness.app, place))).body).toEqual({ underWay: true })
    await press(url, 'pay')
    expect((await returned(placeToken(harness.app, place))).body).toEqual({ underWay: false })
    expect((await school.now(place)).state).toBe('deposit-paid')
  })
  it('with the link of another place neither books nor tells anything of this one', async () => {
    const [place, other] = [await school.held(), await school.held()]
    await press((await begin(place)).url, 'pay')
    expect((await returned(placeToken(harness.app, other))).body).toEqual({ underWay: false })
    expect([(await school.now(place)).state, (await school.now(other)).state]).toEqual(['offered', 'offered'])
    expect([await linesOf(place), await linesOf(other)]).toEqual([[], []])
  })
  it('is refused with a link that is made up, changed or ended', async () => {
    const place = await school.held()
    const token = placeToken(harness.app, place)
    const flipped = Buffer.from(token, 'base64url')
    flipped[3] = (flipped[3] ?? 0) ^ 1
    for (const bad of ['x'.repeat(48), flipped.toString('base64url'), `${token}=`, `${token.slice(0, -1)}!`, token.slice(0, 30)]) {
      expect(await returned(bad), bad).toMatchObject({ status: 404, body: { code: 'place_link_unknown' } })
      expect(readPlaceToken(harness.app, bad)).toBeNull()
    }
    await change(place, { linkVersion: 2 })
    expect((await returned(token)).status).toBe(404)
    expect(readPlaceToken(harness.app, placeToken(harness.app, { id: place.id, linkVersion: 2 }))).toEqual({ placeId: place.id, linkVersion: 2 })
    expect((await returned('\u0000'.repeat(30))).status).toBe(404)
  })
})

describe('the sweep', () => {
  it('books what no message told of, and shuts the page of a place that is not held any more', async () => {
    const [paid, lapsed, untouched] = [await school.held(), await school.held(), await school.held()]
    await press((await begin(paid)).url, 'pay')
    const { url } = await begin(lapsed)
    await begin(untouched)
    await change(lapsed, { state: 'waiting-list', slot: null, heldUntil: null })
    await sweepPayments(harness.app)
    await sweepPayments(harness.app)
    expect((await school.now(paid)).state).toBe('deposit-paid')
    expect(await receiptsOf(paid)).toBe(1)
    expect((await paymentsOf(lapsed))[0]?.state).toBe('expired')
    expect(await (await fetch(url)).text()).toContain('has expired')
    expect((await paymentsOf(untouched))[0]?.state).toBe('open')
  })
  it('finishes what was begun by a process that was killed', async () => {
    const place = await school.held()
    harness.pay.faults.responseLostNext = 3
    await expect(begin(place)).rejects.toMatchObject({ code: 'payments_unreachable' })
    await school.em().nativeUpdate(Payment, { place: place.id }, { createdAt: new Date(Date.now() - 120_000) })
    await sweepPayments(harness.app)
    expect(await paymentsOf(place)).toMatchObject([{ state: 'open', sessionId: expect.stringMatching(/^cs_/) }])
  })
  it('keeps messages that were lost, once, and the work that follows from them', async () => {
    const place = await school.booked()
    const [line] = await linesOf(place)
    await sweepPayments(harness.app)
    await runJobs(harness.app, 'apply-payment')
    await harness.app.payments.refund({ chargeId: line?.reference, amountMinor: 500, key: `later ${place.id}`, reference: 'nothing of ours' })
    await sweepPayments(harness.app)
    const [payment] = await paymentsOf(place)
    expect(await jobsFor(payment?.id ?? '')).toBeGreaterThan(0)
    await runJobs(harness.app, 'apply-payment')
    expect((await linesOf(place)).map(one => one.amountMinor)).toEqual([35_000, -500])
    await sweepPayments(harness.app)
    expect(await jobsFor(payment?.id ?? '')).toBe(0)
    expect(await school.em().count(PaymentEvent, { id: { $in: events(line?.reference ?? '').map(one => one.id) } })).toBe(events(line?.reference ?? '').length)
  })
  it('looks at the others when one cannot be looked at, and says so', async () => {
    const [broken, fine] = [await school.held(), await school.held()]
    await begin(broken)
    await press((await begin(fine)).url, 'pay')
    await school.em().nativeUpdate(Payment, { place: broken.id }, { sessionId: `cs_test_gone_${broken.id}` })
    await expect(sweepPayments(harness.app)).rejects.toThrow(/1 of \d+ looks did not succeed/)
    expect((await school.now(fine)).state).toBe('deposit-paid')
    await school.em().nativeUpdate(Payment, { place: broken.id }, { state: 'expired' })
  })
})

describe('money by bank', () => {
  const today = () => schoolDay(harness.app.clock.schoolNow())
  const take = (place: Pick<BenchPlace, 'id'>, more: Partial<Parameters<typeof takeBankPayment>[4]> = {}) => takeBankPayment(school.em(), harness.app, school.corin, place.id, { purpose: 'deposit', amountMinor: 35_000, reference: `ref ${place.id}`, on: today(), ...more })
  it('books the place once all of the deposit is there, with a receipt a line', async () => {
    const place = await school.held()
    await take(place, { amountMinor: 10_000, reference: `a ${place.id}` })
    expect((await school.now(place)).state).toBe('offered')
    await take(place, { amountMinor: 25_000, reference: `b ${place.id}` })
    expect((await school.now(place)).state).toBe('deposit-paid')
    expect(await receiptsOf(place)).toBe(2)
  })
  it('is written down once by its reference, also by two at the same moment', async () => {
    const place = await school.held()
    const outcomes = await Promise.allSettled([take(place), take(place)])
    expect(outcomes.map(one => one.status === 'fulfilled' ? 'fulfilled' : (one.reason as { code: string }).code).sort()).toEqual(['bank_reference_used', 'fulfilled'])
    expect(await linesOf(place)).toHaveLength(1)
  })
  it('is not taken for a day to come or a place that is over', async () => {
    const place = await school.held()
    await expect(take(place, { on: '2999-01-01' })).rejects.toMatchObject({ code: 'input_invalid' })
    await change(place, { state: 'cancelled', slot: null })
    await expect(take(place)).rejects.toMatchObject({ code: 'place_state' })
    expect(await linesOf(place)).toEqual([])
  })
})
