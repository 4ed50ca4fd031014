import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Payment, type PaymentPurpose } from '#server/db/entities/Payment'
import { SchoolSetting } from '#server/db/entities/SchoolSetting'
import { User, type Role } from '#server/db/entities/User'
import { applyPayment } from '#server/services/money/apply-payment'
import { beginPayment } from '#server/services/money/begin-payment'
import { emptyPlace } from '#server/services/places/empty-place'
import type { Actor } from '#server/utils/actor'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import type { Harness } from '../harness'

/** A school that takes money: a cohort at the handbook's prices, an admin, and places paid as a test says. */
export interface MoneySchool {
  em: () => EntityManager
  corin: Actor
  person: (name: string, roles: Role[]) => Promise<Actor>
  cohortId: string
  /** A place that is held, with a name and address of its own. */
  held: (change?: Partial<Pick<BenchPlace, 'state' | 'slot'>>) => Promise<BenchPlace>
  /** Pays what is due by card, at the stand-in, and writes it down as the worker does. */
  pay: (place: Pick<BenchPlace, 'id'>, purpose?: PaymentPurpose) => Promise<LedgerLine>
  /** A held place with its deposit paid. */
  booked: () => Promise<BenchPlace>
  /** The place as it stands now. */
  now: (place: Pick<BenchPlace, 'id'>) => Promise<BenchPlace>
}

/** @param startsIn days until the course starts */
export async function makeMoneySchool(harness: Harness, { startsIn = 100, places = 8 } = {}): Promise<MoneySchool> {
  const { app } = harness
  const em = (): EntityManager => app.orm.em.fork()
  const startsOn = dayAfter(schoolDay(app.clock.schoolNow()), startsIn)
  let count = 0

  async function person(name: string, roles: Role[]): Promise<Actor> {
    const email = `${name.toLowerCase().split(' ')[0]}@sallowbeck.example`
    const user = await em().transactional(async (tx) => {
      const made = tx.create(User, { email, name, roles, passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
      tx.persist(made)
      return made
    })
    return { id: user.id, name, email, roles, unit: 'mm', sessionId: crypto.randomUUID() }
  }

  const cohortId = await em().transactional(async (tx) => {
    // Price and deposit: handbook 5.4.
    const made = tx.create(Cohort, { code: 'CIN-26', name: 'Cinder', course: null, startsOn, endsOn: dayAfter(startsOn, 88), pattern: 'weeks', places, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', createdAt: new Date() })
    tx.persist(made)
    tx.persist(tx.create(SchoolSetting, { name: 'school', value: { name: 'Sallowbeck School of Head Work', place: 'Old Tram Shed, Weir Lane, Sallowbeck (invented)', currency: 'GBP' } }))
    return made.id
  })

  const now: MoneySchool['now'] = place => em().findOneOrFail(BenchPlace, { id: place.id })
  const held: MoneySchool['held'] = (change = {}) => em().transactional(async (tx) => {
    count += 1
    const made = tx.create(BenchPlace, {
      ...emptyPlace, cohort: tx.getReference(Cohort, cohortId), name: `Guest Number${count}`, email: `guest${count}@sallowbeck.example`, state: 'offered', slot: count,
      askedAt: app.clock.schoolNow(), openedAt: app.clock.schoolNow(), heldUntil: new Date(app.clock.schoolNow().getTime() + 40 * 3_600_000), createdAt: new Date(), ...change,
    })
    tx.persist(made)
    return made
  })
  const pay: MoneySchool['pay'] = async (place, purpose = 'deposit') => {
    const { url } = await beginPayment(em(), app, place.id, purpose)
    await fetch(`${url}/pay`, { method: 'POST', redirect: 'manual' })
    const payment = await em().findOneOrFail(Payment, { place: place.id, purpose, state: 'open' })
    await applyPayment(app, payment.id)
    return em().findOneOrFail(LedgerLine, { payment: payment.id, kind: 'card' })
  }

  return {
    em, person, cohortId, held, pay, now,
    corin: await person('Corin Ashdown', ['admin']),
    async booked() {
      const place = await held()
      await pay(place)
      return now(place)
    },
  }
}
