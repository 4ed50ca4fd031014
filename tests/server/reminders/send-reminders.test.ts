import { afterAll, beforeAll, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { BenchPlace, type PlaceState } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Mail } from '#server/db/entities/Mail'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { placeLink } from '#server/services/places/place-link'
import { sendReminders } from '#server/services/reminders/send-reminders'
import { startOfDay } from '#shared/contract/school-day'
import { openHarness, type Harness } from '../harness'
import { makeSchool, type TestSchool } from '../review/school'
import { sign } from '../walk'

let harness: Harness, school: TestSchool, cinder: string
const em = () => harness.app.orm.em.fork()
beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  // Handbook 5.4: 2,450.00 with a deposit of 350.00; Cinder begins on Monday 21 September 2026.
  cinder = await em().transactional(async (tx) => {
    const cohort = await tx.findOneOrFail(Cohort, { code: 'CIN-26' })
    Object.assign(cohort, { priceMinor: 245_000, depositMinor: 35_000 })
    return cohort.id
  })
})
afterAll(() => harness?.close())

/** Nine in the morning at the school. */
const morning = (day: string) => new Date(startOfDay(day).getTime() + 9 * 3_600_000)
let slot = 0
async function place(name: string, change: { state?: PlaceState, paid?: number, signed?: boolean, account?: boolean, accessUntil?: Date } = {}) {
  const { state = 'deposit-paid', paid = 35_000, signed = false, account = true } = change
  const who = account ? await school.person(name, ['student']) : null
  if (who && signed) await sign(school, who)
  slot += state === 'finished' ? 0 : 1
  const made = await em().transactional(async (tx) => {
    const row = tx.create(BenchPlace, {
      cohort: tx.getReference(Cohort, cinder), person: who ? tx.getReference(User, who.id) : null, name, email: who?.email ?? 'nobody.yet@sallowbeck.example', state, slot: state === 'finished' ? null : slot,
      depositPaidAt: morning('2026-03-10'), accessUntil: change.accessUntil ?? null, createdAt: morning('2026-03-09'),
    })
    tx.persist(row)
    if (paid > 0) tx.persist(tx.create(LedgerLine, { place: row, kind: 'bank', purpose: 'deposit', amountMinor: paid, currency: 'GBP', payment: null, refund: null, reference: crypto.randomUUID(), by: null, at: morning('2026-03-10'), writtenAt: morning('2026-03-10') }))
    return row
  })
  return { who, place: made, mails: async () => (await em().find(Mail, { key: { $like: `%${made.id}%` } }, { orderBy: { createdAt: 'asc' } })) }
}

it('writes each reminder once, however often and however many workers run it', async () => {
  const agnes = await place('Agnes Wetherlam')
  await Promise.all([1, 2, 3].map(() => sendReminders(harness.app, morning('2026-08-10'))))
  await sendReminders(harness.app, morning('2026-08-14'))
  expect((await agnes.mails()).map(one => [one.template, one.subject])).toEqual([['balance-due', 'Balance £2,100.00, due Monday 24 August 2026']])
  const jobs = await em().getConnection().execute<{ n: number }[]>('select count(*)::int as n from pgboss.job where name = \'send-mail\' and data ->> \'mailId\' = ?', [(await agnes.mails())[0]?.id])
  expect(jobs[0]?.n).toBe(1)
  expect((await agnes.mails())[0]?.text).toContain(placeLink(harness.app, agnes.place))
})

it('sends nothing in the night', async () => {
  const night = await place('Benedikt Ullock')
  await sendReminders(harness.app, new Date(startOfDay('2026-08-21').getTime() + 3 * 3_600_000))
  expect(await night.mails()).toEqual([])
  await sendReminders(harness.app, morning('2026-08-21'))
  expect((await night.mails()).map(one => one.template)).toEqual(['balance-due'])
})

it('says a balance is late the day after, then lists the place once for the office and leaves it as it is', async () => {
  const callum = await place('Callum Thrapp')
  await sendReminders(harness.app, morning('2026-08-25'))
  const late = (await callum.mails()).find(one => one.template === 'balance-late')
  expect(late?.subject).toBe('Balance now 1 day late')
  expect(late?.text).toContain('Your place is held until Sunday 30 August 2026.')
  const listed = () => em().count(AuditEvent, { action: 'place-overdue', subject: `place:${callum.place.id}` })
  await sendReminders(harness.app, morning('2026-08-29'))
  expect(await listed()).toBe(0)
  for (const day of ['2026-08-30', '2026-08-31', '2026-09-01']) await sendReminders(harness.app, morning(day))
  expect(await listed()).toBe(1)
  expect(await em().findOneOrFail(BenchPlace, callum.place.id)).toMatchObject({ state: 'deposit-paid', slot: callum.place.slot })
})

it('asks nobody for a balance that is paid', async () => {
  const paid = await place('Freya Dunmallet', { paid: 245_000, signed: true })
  await sendReminders(harness.app, morning('2026-08-25'))
  expect(await paid.mails()).toEqual([])
})

it('asks for the safety form until it is signed, and says what it still needs', async () => {
  const joss = await place('Joss Ivelle', { state: 'confirmed', paid: 245_000 })
  await sendReminders(harness.app, morning('2026-09-07'))
  const [mail] = await joss.mails()
  expect(mail).toMatchObject({ template: 'safety-form-not-done', subject: 'Two boxes left before you may use a tool' })
  expect(mail?.text).toContain('Joss, your form still needs its ticks and your name under them and your boot size. Without it you can watch but not cut.')
  expect(mail?.text).toContain(`${harness.app.config.publicUrl}/safety-form`)
  await sign(school, joss.who!)
  await sendReminders(harness.app, morning('2026-09-18'))
  expect((await joss.mails()).map(one => one.template)).toEqual(['safety-form-not-done', 'welcome'])
})

it('welcomes three days before with the number of the core, also somebody who has no account yet', async () => {
  const parveen = await place('Parveen Loder', { state: 'confirmed', paid: 245_000, signed: true })
  const guest = await place('Mateus Corrigill', { state: 'confirmed', paid: 245_000, account: false })
  const headId = await school.anotherHead('DNK-0190', parveen.who!)
  await em().nativeUpdate(PracticeHead, headId, { cohort: cinder })
  await sendReminders(harness.app, morning('2026-09-18'))
  const [mail] = await parveen.mails()
  expect(mail).toMatchObject({ template: 'welcome', subject: 'Monday: what to bring' })
  expect(mail?.text).toContain('Your core is DNK-0190.')
  const [other] = (await guest.mails()).filter(one => one.template === 'welcome')
  expect(other).toMatchObject({ to: 'nobody.yet@sallowbeck.example', person: null })
  expect(other?.text).not.toContain('Your core')
})

it('warns alumni thirty days before the lessons close', async () => {
  const saoirse = await place('Saoirse Linfield', { state: 'finished', paid: 245_000, signed: true, accessUntil: morning('2028-12-18') })
  await sendReminders(harness.app, morning('2028-11-17'))
  expect(await saoirse.mails()).toEqual([])
  await sendReminders(harness.app, morning('2028-11-18'))
  expect((await saoirse.mails()).map(one => one.subject)).toEqual(['Your access ends 18 December 2028'])
  expect((await saoirse.mails())[0]?.text).toContain('your own record never does. £40.00 keeps them open a year.')
})
