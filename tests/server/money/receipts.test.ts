import { createHash } from 'node:crypto'
import { simpleParser } from 'mailparser'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Mail } from '#server/db/entities/Mail'
import { Payment } from '#server/db/entities/Payment'
import { Receipt } from '#server/db/entities/Receipt'
import { User } from '#server/db/entities/User'
import { deliverMail } from '#server/services/mail/deliver-mail'
import { applyPayment } from '#server/services/money/apply-payment'
import { beginPayment } from '#server/services/money/begin-payment'
import { issueReceipt } from '#server/services/money/issue-receipt'
import { makeReceipt } from '#server/services/money/make-receipt'
import { takeBankPayment } from '#server/services/money/take-bank-payment'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter, dayInWords } from '#shared/domain/money/calendar-days'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api } from '../http'
import { makeMoneySchool, type MoneySchool } from './money-school'
import { readPdf } from './read-pdf'
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

const today = () => schoolDay(harness.app.clock.schoolNow())
const receiptOf = (placeId: string) => school.em().find(Receipt, { line: { place: placeId } }, { orderBy: { number: 'asc' } })
const stored = async (receipt: Receipt) => readPdf(await harness.app.storage.read(receipt.key ?? ''))

describe('the numbers of receipts', () => {
  it('go up by one, whoever pays at the same moment and whatever is undone in between', async () => {
    const places = await Promise.all(Array.from({ length: 10 }, () => school.held()))
    // By itself, so that nothing but the numbers' own lock puts them in a row: not the cohort that payments hold.
    const issue = (place: BenchPlace, reference: string, giveUp: boolean) => school.em().transactional(async (tx) => {
      const line = tx.create(LedgerLine, { place: tx.getReference(BenchPlace, place.id), kind: 'bank', purpose: 'deposit', amountMinor: 1, currency: 'GBP', payment: null, refund: null, reference, by: null, at: new Date(), writtenAt: new Date() })
      tx.persist(line)
      await issueReceipt(tx, harness.app, line)
      if (giveUp) throw new Error('given up after its number was given')
    })
    const outcomes = await Promise.allSettled(places.flatMap((place, at) => [issue(place, `KEPT ${at}`, false), issue(place, `GIVEN UP ${at}`, true)]))
    expect(outcomes.filter(one => one.status === 'fulfilled')).toHaveLength(10)
    const numbers = (await school.em().find(Receipt, {}, { orderBy: { number: 'asc' } })).map(one => one.number)
    expect(numbers).toEqual(Array.from({ length: 10 }, (_, at) => at + 1))
  })

  it('are one a line, however often it is asked for', async () => {
    const place = await school.booked()
    const line = await school.em().findOneOrFail(LedgerLine, { place: place.id, kind: 'card' })
    const again = await Promise.all([1, 2, 3].map(() => school.em().transactional(tx => issueReceipt(tx, harness.app, line))))
    expect(new Set(again.map(one => one.number)).size).toBe(1)
    expect(await receiptOf(place.id)).toHaveLength(1)
  })

  it('are not given for money that went', async () => {
    const place = await school.booked()
    const line = await school.em().transactional(async (tx) => {
      const made = tx.create(LedgerLine, { place: tx.getReference(BenchPlace, place.id), kind: 'bank-refund', purpose: 'deposit', amountMinor: -100, currency: 'GBP', payment: null, refund: null, reference: 'OUT 1', by: null, at: new Date(), writtenAt: new Date() })
      tx.persist(made)
      return made
    })
    await expect(school.em().transactional(tx => issueReceipt(tx, harness.app, line))).rejects.toThrow(RangeError)
  })
})

describe('the receipt of a deposit', () => {
  it('comes by e-mail, says what was paid and what is still due, and can be read aloud', async () => {
    const place = await school.booked()
    const [receipt] = await receiptOf(place.id)
    await makeReceipt(harness.app, receipt!.id)
    await deliverMail(harness.app, (await school.em().findOneOrFail(Mail, { key: `receipt:${receipt!.id}` })).id)
    const number = `S-${String(receipt!.number).padStart(6, '0')}`
    const { startsOn } = await school.em().findOneOrFail(BenchPlace, { id: place.id }, { populate: ['cohort'] }).then(one => one.cohort.$)
    const due = dayInWords(dayAfter(startsOn, -28))

    const message = harness.mail.inbox.list({ to: place.email }).find(one => one.subject === 'Your place in Cinder is booked')
    expect(message?.text).toContain(`£350.00 received ${dayInWords(today())}; receipt attached.`)
    expect(message?.text).toContain(`Balance £2,100.00 by ${due}. Until ${dayInWords(dayAfter(today(), 14))} you may cancel for a full refund.`)
    const { attachments } = await simpleParser(harness.mail.inbox.raw(message!.id)!)
    expect(attachments.map(one => [one.filename, one.contentType])).toEqual([[`${number}.pdf`, 'application/pdf']])
    expect(createHash('sha256').update(attachments[0]!.content).digest('hex')).toBe((await school.em().findOneOrFail(Receipt, receipt!.id)).sha256)

    const pdf = readPdf(attachments[0]!.content)
    expect(pdf.text).toContain(`Receipt ${number}`)
    expect(pdf.text).toContain(`Received from ${place.name} on`)
    expect(pdf.text).toContain('Old Tram Shed, Weir Lane, Sallowbeck')
    expect(pdf.text).not.toContain('invented')
    expect(pdf.text.replaceAll('\n', ' ')).toContain(`Received £350.00 Price of the place £2,450.00 Paid before £0.00 Still to pay, by ${due} £2,100.00`)
    // PDF/UA-1 (ISO 14289-1) 7.1 and 7.2: marked, a language, a title to show, headings and table headings; every font embedded.
    expect(pdf).toMatchObject({ marked: true, language: 'en-GB', showsTitle: true, title: `Receipt ${number}, Sallowbeck School of Head Work`, universal: true, fontsEmbedded: true })
    expect(pdf.tags.filter(tag => ['Document', 'H1', 'Table'].includes(tag))).toEqual(['Document', 'H1', 'Table'])
    expect(pdf.tags.filter(tag => tag === 'TR')).toHaveLength(4)
    expect(pdf.tags.filter(tag => tag === 'TH')).toHaveLength(4)
  })

  it('says no day to cancel by past the day before the start, and none once that is over', async () => {
    const near = await openHarness()
    try {
      const soon = await makeMoneySchool(near, { startsIn: 5 })
      const place = await soon.booked()
      await runJobs(near.app, 'make-receipt')
      const letter = await soon.em().findOneOrFail(Mail, { to: place.email, template: 'deposit-received' })
      const day = schoolDay(near.app.clock.schoolNow())
      // Due when the deposit was paid, where 28 days before the start is past.
      expect(letter.text).toContain(`Balance £2,100.00 by ${dayInWords(day)}. Until ${dayInWords(dayAfter(day, 4))} you may cancel for a full refund.`)
    }
    finally {
      await near.close()
    }
  })

  it('is the same, byte for byte, when the job runs again, and is mailed once', async () => {
    const place = await school.booked()
    const [receipt] = await receiptOf(place.id)
    await makeReceipt(harness.app, receipt!.id)
    const first = await harness.app.storage.sha256Of(`receipts/${receipt!.id}.pdf`)
    // As after a crash between storing and saying so.
    await school.em().nativeUpdate(Receipt, { id: receipt!.id }, { key: null, sha256: null })
    await new Promise(done => setTimeout(done, 1100))
    await Promise.all([makeReceipt(harness.app, receipt!.id), makeReceipt(harness.app, receipt!.id)])
    await makeReceipt(harness.app, receipt!.id)
    expect(await harness.app.storage.sha256Of(`receipts/${receipt!.id}.pdf`)).toBe(first)
    expect((await school.em().findOneOrFail(Receipt, receipt!.id)).sha256).toBe(first)
    expect(await school.em().count(Mail, { key: `receipt:${receipt!.id}` })).toBe(1)
  })
})

it('acknowledges the balance, in parts and whole', async () => {
  const place = await school.booked()
  await takeBankPayment(school.em(), harness.app, school.corin, place.id, { purpose: 'balance', amountMinor: 100_000, reference: 'PART 1', on: today() })
  await school.pay(place, 'balance')
  await runJobs(harness.app, 'make-receipt')
  const letters = await school.em().find(Mail, { to: place.email, template: 'balance-received' }, { orderBy: { createdAt: 'asc' } })
  expect(letters.map(one => one.subject)).toEqual(['£1,000.00 received for your place in Cinder', 'Your place in Cinder is paid'])
  const [, part, whole] = await receiptOf(place.id)
  expect((await stored(part!)).text.replaceAll('\n', ' ')).toContain('by bank transfer, reference PART 1.')
  expect((await stored(part!)).text).toMatch(/Paid before\s*£350\.00[^]*Still to pay, by[^]*£1,100\.00/)
  expect((await stored(whole!)).text).toMatch(/Received\s*£1,100\.00[^]*Paid before\s*£1,350\.00[^]*Still to pay\s*£0\.00/)
})

it('does not say a place is booked when the payment came too late for one, but that it goes back', async () => {
  const full = await openHarness()
  try {
    const small = await makeMoneySchool(full, { places: 1 })
    const late = await small.held()
    const { url } = await beginPayment(small.em(), full.app, late.id, 'deposit')
    // The hold ends and somebody else takes the one bench while the payer types.
    await small.em().nativeUpdate(BenchPlace, { id: late.id }, { state: 'waiting-list', slot: null, heldUntil: null })
    await small.held({ slot: 1, state: 'confirmed' })
    await fetch(`${url}/pay`, { method: 'POST', redirect: 'manual' })
    const payment = await small.em().findOneOrFail(Payment, { place: late.id })
    await applyPayment(full.app, payment.id)
    await runJobs(full.app, 'make-receipt', 'send-refund', 'apply-payment')
    const mails = await small.em().find(Mail, { to: late.email }, { orderBy: { createdAt: 'asc' } })
    expect(mails.map(one => one.subject).sort()).toEqual(['Your payment of £350.00 goes back to you', 'Your refund of £350.00'])
    expect(mails.find(one => one.template === 'refund')?.text).toContain('your payment came when the place in Cinder was gone')
  }
  finally {
    await full.close()
  }
})

describe('the file of a receipt', () => {
  it('goes to its owner and the office, and to nobody else', async () => {
    const place = await school.booked()
    const [receipt] = await receiptOf(place.id)
    const number = `S-${String(receipt!.number).padStart(6, '0')}`
    const owner = await api.as(await school.em().findOneOrFail(User, { email: place.email }))
    const office = await api.as(school.corin)
    const other = await api.as(await school.person('Bettany Crake', ['student']))
    expect(await owner.get(`/api/receipts/${number}/file`)).toMatchObject({ status: 409, body: { code: 'receipt_not_ready' } })
    await makeReceipt(harness.app, receipt!.id)
    for (const who of [owner, office]) {
      const answer = await who.get(`/api/receipts/${number}/file`)
      expect(answer.status).toBe(302)
      const file = await fetch(answer.headers.get('location') ?? '')
      expect([file.status, file.headers.get('content-type'), file.headers.get('content-disposition')]).toEqual([200, 'application/pdf', `attachment; filename="${number}.pdf"; filename*=UTF-8''${number}.pdf`])
      expect(createHash('sha256').update(new Uint8Array(await file.arrayBuffer())).digest('hex')).toBe((await school.em().findOneOrFail(Receipt, receipt!.id)).sha256)
    }
    expect(await other.get(`/api/receipts/${number}/file`)).toMatchObject({ status: 404, body: { code: 'receipt_not_found' } })
    expect((await api.nobody.get(`/api/receipts/${number}/file`)).status).toBe(401)
    expect(await office.get('/api/receipts/S-999999/file')).toMatchObject({ status: 404, body: { code: 'receipt_not_found' } })
    for (const wrong of ['S-1', 'S-0000000000001', '000001', 'S-00000x', '%00']) expect((await office.get(`/api/receipts/${wrong}/file`)).status, wrong).toBe(404)
  })
})
