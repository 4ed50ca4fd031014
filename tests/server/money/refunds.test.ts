import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Mail } from '#server/db/entities/Mail'
import { Payment } from '#server/db/entities/Payment'
import { Refund } from '#server/db/entities/Refund'
import { applyPayment } from '#server/services/money/apply-payment'
import { decideRefund } from '#server/services/money/decide-refund'
import { moneyOfPlace } from '#server/services/money/money-of-place'
import { openMoney } from '#server/services/money/open-money'
import { quoteRefund } from '#server/services/money/quote-refund'
import { sendRefund } from '#server/services/money/send-refund'
import { takeBankPayment } from '#server/services/money/take-bank-payment'
import { cancelPlace } from '#server/services/places/cancel-place'
import { movePlace } from '#server/services/places/move-place'
import { schoolDay } from '#shared/contract/school-day'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeMoneySchool, type MoneySchool } from './money-school'
import { runJobs } from './run-jobs'

let harness: Harness, api: Api, school: MoneySchool, corin: Caller
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeMoneySchool(harness, { places: 60 })
  corin = await api.as(school.corin)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})
beforeEach(async () => {
  harness.pay.faults.refundRefusedNext = 0
  // What a test before left undone would meet the faults of this one.
  await runJobs(harness.app, 'send-refund', 'apply-payment')
})

const today = () => schoolDay(harness.app.clock.schoolNow())
const refundsOf = (placeId: string) => school.em().find(Refund, { place: placeId }, { orderBy: { amountMinor: 'desc' } })
const mailsOf = (email: string, template = 'refund') => school.em().find(Mail, { to: email, template })
const atProcessor = async (placeId: string) => {
  const payments = await school.em().find(Payment, { place: placeId })
  const all = await Promise.all(payments.map(one => harness.app.payments.readCheckout(one.sessionId ?? '')))
  return all.flatMap(one => one.charges.flatMap(charge => charge.refunds.map(refund => refund.amountMinor)))
}
const gone = (placeId: string) => school.em().find(LedgerLine, { place: placeId, kind: { $in: ['card-refund', 'bank-refund'] } })

describe('a place that is cancelled', () => {
  it('gets back by the rule, to the card that paid, told once with rule and sum', async () => {
    const place = await school.booked()
    await school.pay(place, 'balance')
    const quote = await quoteRefund(school.em(), harness.app, place, { cause: 'student' })
    // Paid today, 100 days before the start: the first row of the table.
    expect(quote).toMatchObject({ rule: 'within-14-days', back: { minor: 245_000, currency: 'GBP' }, mayMove: true })
    expect(quote.parts.map(part => [part.purpose, part.amount.minor])).toEqual([['deposit', 35_000], ['balance', 210_000]])

    await cancelPlace(school.em(), harness.app, school.corin, place.id, { cause: 'student', seenMinor: 245_000, note: '' })
    expect((await refundsOf(place.id)).map(one => [one.amountMinor, one.state, one.decidedBy?.id])).toEqual([[210_000, 'decided', school.corin.id], [35_000, 'decided', school.corin.id]])
    await runJobs(harness.app, 'send-refund', 'apply-payment')

    expect((await atProcessor(place.id)).sort()).toEqual([210_000, 35_000])
    expect((await gone(place.id)).map(line => line.amountMinor).sort((a, b) => a - b)).toEqual([-210_000, -35_000])
    expect((await refundsOf(place.id)).map(one => one.state)).toEqual(['sent', 'sent'])
    const [letter, ...more] = await mailsOf(place.email)
    expect(more).toEqual([])
    expect(letter).toMatchObject({ subject: 'Your refund of £2,450.00' })
    expect(letter?.text).toContain('100 days before the start')
    expect(letter?.text).toContain('Rule: Within 14 days of paying the deposit, course not begun: deposit all back; balance all back. Where local consumer law gives more, the law applies.')
    expect(letter?.text).toContain('Sum: Deposit 350.00 paid - 0.00 kept = 350.00 back; balance 2,100.00 paid - 0.00 kept = 2,100.00 back; together 2,450.00 back.')
    expect(letter?.text).not.toMatch(/[{}]|undefined|null/)
  })

  it('gets back what it brought from another cohort to the card that paid there, and writes it down here', async () => {
    const place = await school.booked()
    const to = await school.em().transactional(async (tx) => {
      const { startsOn, endsOn } = await tx.findOneOrFail(Cohort, { code: 'CIN-26' })
      const made = tx.create(Cohort, { code: 'DRO-27', name: 'Dross', course: null, startsOn, endsOn, pattern: 'weeks', places: 8, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', createdAt: new Date() })
      tx.persist(made)
      return made.code
    })
    const movedId = await movePlace(school.em(), harness.app, school.corin, place.id, { to, cause: 'student', note: '' })
    const quote = await quoteRefund(school.em(), harness.app, { id: movedId }, { cause: 'student' })
    // Still within 14 days of paying, and moved once: it may not move again.
    expect(quote).toMatchObject({ rule: 'within-14-days', back: { minor: 35_000 }, mayMove: false })
    expect((await moneyOfPlace(school.em(), place.id)).held.deposit).toBe(0)
    expect((await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 1, reason: 'x' })).body).toMatchObject({ code: 'refund_too_much' })

    await cancelPlace(school.em(), harness.app, school.corin, movedId, { cause: 'student', seenMinor: 35_000, note: '' })
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect(await atProcessor(place.id)).toEqual([35_000])
    expect((await gone(movedId)).map(line => line.amountMinor)).toEqual([-35_000])
    expect(await gone(place.id)).toEqual([])
    expect((await moneyOfPlace(school.em(), movedId)).held.deposit).toBe(0)
  })

  it('gives back once when two cancel at the same moment', async () => {
    const place = await school.booked()
    const cancel = () => cancelPlace(school.em(), harness.app, school.corin, place.id, { cause: 'student', seenMinor: 35_000, note: '' })
    const outcomes = await Promise.allSettled([cancel(), cancel(), cancel()])
    expect(outcomes.map(one => one.status).sort()).toEqual(['fulfilled', 'rejected', 'rejected'])
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect(await atProcessor(place.id)).toEqual([35_000])
  })

  it('sends once when the job runs twice at once, or its answer is lost on the way', async () => {
    const place = await school.booked()
    await cancelPlace(school.em(), harness.app, school.corin, place.id, { cause: 'student', seenMinor: 35_000, note: '' })
    const [refund] = await refundsOf(place.id)
    harness.pay.faults.responseLostNext = 1
    await Promise.allSettled([sendRefund(harness.app, refund!.id), sendRefund(harness.app, refund!.id)])
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect(await atProcessor(place.id)).toEqual([35_000])
    expect(await gone(place.id)).toHaveLength(1)
    expect(await mailsOf(place.email)).toHaveLength(1)
  })
})

describe('a quote decided again', () => {
  it('is refused: the school does not hold that money any more', async () => {
    const place = await school.booked()
    const quote = await quoteRefund(school.em(), harness.app, place, { cause: 'school' })
    await school.em().transactional(tx => decideRefund(tx, harness.app, null, place, quote))
    await expect(school.em().transactional(tx => decideRefund(tx, harness.app, null, place, quote))).rejects.toMatchObject({ code: 'refund_too_much' })
    expect(await refundsOf(place.id)).toHaveLength(1)
  })

  it('is refused for a card that did not pay, though the place holds the money', async () => {
    const [place, other] = [await school.booked(), await school.booked()]
    const quote = await quoteRefund(school.em(), harness.app, other, { cause: 'school' })
    await expect(school.em().transactional(tx => decideRefund(tx, harness.app, null, place, quote))).rejects.toMatchObject({ code: 'refund_too_much' })
    expect(await refundsOf(place.id)).toEqual([])
  })
})

describe('a refund by hand', () => {
  it('gives part back for a reason, and never more than is left', async () => {
    const place = await school.booked()
    const first = await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 10_000, reason: 'A night of the hall was lost to a flood.' }, crypto.randomUUID())
    expect(first).toMatchObject({ status: 201, body: { left: { minor: 25_000 }, refunds: [{ by: 'card', purpose: 'deposit', amount: { minor: 10_000 }, rule: 'by-hand', sum: '350.00 held - 250.00 kept = 100.00 back' }] } })
    const more = await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 25_001, reason: 'More.' })
    expect(more).toMatchObject({ status: 422, body: { code: 'refund_too_much', left: { minor: 25_000 } } })
    expect(String(more.body.title)).toContain('£250.00')
    expect(await refundsOf(place.id)).toHaveLength(1)
    expect((await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 25_000, reason: 'All of it.' })).status).toBe(201)
    expect((await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 1, reason: 'A penny.' })).body).toMatchObject({ code: 'refund_too_much' })
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect((await atProcessor(place.id)).sort()).toEqual([10_000, 25_000])
    expect((await mailsOf(place.email)).map(mail => mail.subject).sort()).toEqual(['Your refund of £100.00', 'Your refund of £250.00'])
  })

  it('gives once under one key, and the first answer again', async () => {
    const place = await school.booked()
    const key = crypto.randomUUID()
    const send = () => corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 5000, reason: 'Twice by mistake.' }, key)
    const [one, two] = await Promise.all([send(), send()])
    const three = await send()
    expect([one.status, two.status, three.status]).toEqual([201, 201, 201])
    expect(two.body).toEqual(one.body)
    expect(three.body).toEqual(one.body)
    expect(await refundsOf(place.id)).toHaveLength(1)
  })

  it('gives no more than is left to two who decide at the same moment', async () => {
    const place = await school.booked()
    const send = () => corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 20_000, reason: 'At once.' })
    const statuses = (await Promise.all([send(), send(), send()])).map(one => one.status)
    expect(statuses.sort()).toEqual([201, 422, 422])
    expect((await moneyOfPlace(school.em(), place.id)).held.deposit).toBe(15_000)
  })

  it.each([
    ['half a penny', 100.5], ['nothing', 0], ['less than nothing', -100], ['more than a course could cost', 10_000_001], ['words', '100'], ['no amount', null],
  ])('of %s is refused, and nothing is kept', async (_what, amountMinor) => {
    const place = await school.booked()
    const answer = await corin.post(`/api/places/${place.id}/refunds`, { amountMinor, reason: 'Wrong.' })
    expect(answer).toMatchObject({ status: 422, body: { code: 'input_invalid', issues: [{ path: 'amountMinor' }] } })
    expect(await refundsOf(place.id)).toEqual([])
  })

  it.each([
    ['NaN', '{"amountMinor":NaN,"reason":"x"}', 400, 'body_not_json'],
    ['1e999', '{"amountMinor":1e999,"reason":"x"}', 422, 'input_invalid'],
    ['a NUL in the reason', '{"amountMinor":100,"reason":"a\\u0000b"}', 422, 'input_invalid'],
    ['a lone surrogate in the reason', '{"amountMinor":100,"reason":"a\\ud800b"}', 422, 'input_invalid'],
    ['no reason', '{"amountMinor":100,"reason":"  "}', 422, 'input_invalid'],
    ['a currency of its own', '{"amountMinor":100,"reason":"x","currency":"USD"}', 422, 'input_invalid'],
  ])('with %s is refused, and nothing is kept', async (_what, body, status, code) => {
    const place = await school.booked()
    expect(await corin.call('POST', `/api/places/${place.id}/refunds`, body)).toMatchObject({ status, body: { code } })
    expect(await refundsOf(place.id)).toEqual([])
  })

  it('of a place that is nobody\'s is refused', async () => {
    expect(await corin.post(`/api/places/${crypto.randomUUID()}/refunds`, { amountMinor: 100, reason: 'x' })).toMatchObject({ status: 404, body: { code: 'place_not_found' } })
  })
})

describe('a refund the card processor refuses', () => {
  it('keeps its words on the office\'s list, and goes when sent again', async () => {
    const place = await school.booked()
    await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 35_000, reason: 'All of it.' })
    harness.pay.faults.refundRefusedNext = 1
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    const [refused] = await refundsOf(place.id)
    expect(refused).toMatchObject({ state: 'refused', problem: 'The card issuer does not take this refund.' })
    expect((await openMoney(school.em(), harness.app)).refunds[0]).toMatchObject({ id: refused!.id, state: 'refused', problem: 'The card issuer does not take this refund.', place: { cohort: 'CIN-26' } })
    expect(await mailsOf(place.email)).toEqual([])
    // Its money is still here.
    expect((await moneyOfPlace(school.em(), place.id)).held.deposit).toBe(35_000)

    expect(await corin.post(`/api/refunds/${refused!.id}/again`)).toMatchObject({ status: 200, body: { state: 'decided', problem: null } })
    expect(await corin.post(`/api/refunds/${refused!.id}/again`)).toMatchObject({ status: 409, body: { code: 'refund_not_open' } })
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect(await atProcessor(place.id)).toEqual([35_000])
    expect(await mailsOf(place.email)).toHaveLength(1)
    expect((await openMoney(school.em(), harness.app)).refunds.map(one => one.id)).not.toContain(refused!.id)
  })

  it('does not keep what went with it from being told', async () => {
    const place = await school.booked()
    await school.pay(place, 'balance')
    await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 245_000, reason: 'All of it.' })
    harness.pay.faults.refundRefusedNext = 1
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect((await refundsOf(place.id)).map(one => one.state).sort()).toEqual(['refused', 'sent'])
    const [line] = await gone(place.id)
    expect((await mailsOf(place.email)).map(mail => mail.subject)).toEqual([line?.amountMinor === -210_000 ? 'Your refund of £2,100.00' : 'Your refund of £350.00'])
  })

  it('may go by bank instead, once', async () => {
    const place = await school.booked()
    await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 35_000, reason: 'All of it.' })
    harness.pay.faults.refundRefusedNext = 1
    await runJobs(harness.app, 'send-refund')
    const [refused] = await refundsOf(place.id)
    const body = { refundId: refused!.id, reference: `FP ${place.id}`, on: today() }
    expect(await corin.post(`/api/places/${place.id}/bank-refunds`, body)).toMatchObject({ status: 201, body: { state: 'sent', problem: null } })
    expect(await corin.post(`/api/places/${place.id}/bank-refunds`, { ...body, reference: 'another' })).toMatchObject({ status: 409, body: { code: 'refund_not_open' } })
    expect(await corin.post(`/api/refunds/${refused!.id}/again`)).toMatchObject({ status: 409, body: { code: 'refund_not_open' } })
    expect((await gone(place.id)).map(line => [line.kind, line.amountMinor])).toEqual([['bank-refund', -35_000]])
    expect((await mailsOf(place.email))[0]?.text).toContain('Paid to your bank account')
  })

  it('is not sent again when its money went another way', async () => {
    const place = await school.booked()
    await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 35_000, reason: 'All of it.' })
    harness.pay.faults.refundRefusedNext = 1
    await runJobs(harness.app, 'send-refund')
    const [refused] = await refundsOf(place.id)
    expect((await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 20_000, reason: 'Part of it, then.' })).status).toBe(201)
    expect(await corin.post(`/api/refunds/${refused!.id}/again`)).toMatchObject({ status: 422, body: { code: 'refund_too_much' } })
    expect(await corin.post(`/api/places/${place.id}/bank-refunds`, { refundId: refused!.id, reference: 'FP 77', on: today() })).toMatchObject({ status: 422, body: { code: 'refund_too_much' } })
    expect((await openMoney(school.em(), harness.app)).refunds.map(one => one.id)).not.toContain(refused!.id)
  })
})

describe('money that came by bank', () => {
  it('goes back by bank, is written down by hand, and only once by its reference', async () => {
    const place = await school.held()
    await takeBankPayment(school.em(), harness.app, school.corin, place.id, { purpose: 'deposit', amountMinor: 35_000, reference: `IN ${place.id}`, on: today() })
    await cancelPlace(school.em(), harness.app, school.corin, place.id, { cause: 'student', seenMinor: 35_000, note: '' })
    const [refund] = await refundsOf(place.id)
    expect(refund).toMatchObject({ payment: null, state: 'decided', purpose: 'deposit' })
    await runJobs(harness.app, 'send-refund', 'apply-payment')
    expect((await openMoney(school.em(), harness.app)).refunds).toContainEqual(expect.objectContaining({ id: refund!.id, by: 'bank', state: 'decided' }))

    const body = { refundId: refund!.id, reference: `OUT ${place.id}`, on: today() }
    const other = await school.booked()
    expect(await corin.post(`/api/places/${other.id}/bank-refunds`, body)).toMatchObject({ status: 404, body: { code: 'refund_not_found' } })
    expect(await corin.post(`/api/places/${place.id}/bank-refunds`, { ...body, on: '2999-01-01' })).toMatchObject({ status: 422, body: { code: 'day_to_come' } })
    expect(await corin.post(`/api/places/${place.id}/bank-refunds`, { ...body, on: '2026-02-30' })).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
    expect(await corin.post(`/api/places/${place.id}/bank-refunds`, body)).toMatchObject({ status: 201, body: { state: 'sent' } })
    expect((await mailsOf(place.email))[0]?.text).toContain('Paid to your bank account')

    const third = await school.held()
    await takeBankPayment(school.em(), harness.app, school.corin, third.id, { purpose: 'deposit', amountMinor: 35_000, reference: `IN ${third.id}`, on: today() })
    await corin.post(`/api/places/${third.id}/refunds`, { amountMinor: 100, reason: 'A pound.' })
    const [small] = await refundsOf(third.id)
    expect(await corin.post(`/api/places/${third.id}/bank-refunds`, { refundId: small!.id, reference: body.reference, on: today() })).toMatchObject({ status: 409, body: { code: 'bank_reference_used' } })
    expect(await gone(third.id)).toEqual([])
  })

  it('goes back by bank for its part, and to the card for the card\'s', async () => {
    const place = await school.booked()
    await takeBankPayment(school.em(), harness.app, school.corin, place.id, { purpose: 'balance', amountMinor: 210_000, reference: `IN ${place.id}`, on: today() })
    const { parts } = await quoteRefund(school.em(), harness.app, place, { cause: 'school' })
    expect(parts.map(part => [part.purpose, part.paymentId === null ? 'bank' : 'card', part.amount.minor])).toEqual([['deposit', 'card', 35_000], ['balance', 'bank', 210_000]])
  })
})

it('writes what somebody refunded at the processor by itself as gone, and gives no more than what is left of the card', async () => {
  const place = await school.booked()
  const payment = await school.em().findOneOrFail(Payment, { place: place.id })
  await harness.app.payments.refund({ intentId: payment.intentId!, amountMinor: 30_000, key: crypto.randomUUID(), reference: 'by somebody there' })
  await applyPayment(harness.app, payment.id)
  const money = await moneyOfPlace(school.em(), place.id)
  expect([money.held.deposit, money.cards[0]?.leftMinor]).toEqual([5000, 5000])
  expect(await corin.post(`/api/places/${place.id}/refunds`, { amountMinor: 5001, reason: 'x' })).toMatchObject({ status: 422, body: { code: 'refund_too_much' } })
})
