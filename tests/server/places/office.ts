import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import { LedgerLine, type LedgerKind } from '#server/db/entities/LedgerLine'
import { Mail } from '#server/db/entities/Mail'
import type { PaymentPurpose } from '#server/db/entities/Payment'
import { User, type Role } from '#server/db/entities/User'
import { createClock } from '#server/adapters/clock/clock'
import { askForPlace } from '#server/services/places/ask-for-place'
import { depositPaid } from '#server/services/places/deposit-paid'
import { openPlace } from '#server/services/places/open-place'
import { placeToken } from '#server/services/places/place-link'
import type { Actor } from '#server/utils/actor'
import type { Harness } from '../harness'

/** A school with nothing but its office: cohorts to ask for, and a clock a test can turn. */
export interface TestOffice {
  em: () => EntityManager
  corin: Actor
  /** Turns the school's clock forward. */
  wait: (minutes: number) => void
  cohort: (given: Partial<Pick<Cohort, 'code' | 'name' | 'startsOn' | 'endsOn' | 'places' | 'open' | 'priceMinor' | 'depositMinor'>> & { code: string }) => Promise<Cohort>
  /** Asks; answers the place. Each from a network address of its own. */
  ask: (code: string, name: string) => Promise<BenchPlace>
  /** Asks and opens the link. */
  askAndOpen: (code: string, name: string) => Promise<BenchPlace>
  open: (place: Pick<BenchPlace, 'id' | 'linkVersion'>) => Promise<BenchPlace>
  token: (place: Pick<BenchPlace, 'id' | 'linkVersion'>) => string
  again: (place: Pick<BenchPlace, 'id'>) => Promise<BenchPlace>
  /** A line of the ledger as the bank's book would have it, and what follows from a deposit. */
  payDeposit: (place: Pick<BenchPlace, 'id'>, amountMinor?: number) => Promise<'booked' | 'no-place'>
  line: (place: Pick<BenchPlace, 'id'>, purpose: PaymentPurpose, amountMinor: number, kind?: LedgerKind) => Promise<LedgerLine>
  mails: (template: string) => Promise<Mail[]>
  person: (name: string, roles: Role[]) => Promise<Actor>
}

export const emailOf = (name: string) => `${name.toLowerCase().replaceAll(' ', '.')}@sallowbeck.example`

/** @param at where the school's clock stands */
export async function openOffice(harness: Harness, at = '2026-03-26T19:40:00Z'): Promise<TestOffice> {
  const em = (): EntityManager => harness.app.orm.em.fork()
  let ahead = 0
  const seededAt = new Date().toISOString()
  const turned = createClock({ demoNow: at, seededAt }, () => new Date(Date.now() + ahead))
  harness.app.clock = { now: () => new Date(), schoolNow: turned.schoolNow }
  const course = await em().transactional(async (tx) => {
    const made = tx.create(Course, { code: 'head-porting', title: 'Cylinder-head porting', summary: 'From core to final flow.', createdAt: new Date() })
    tx.persist(made)
    return made
  })
  let asks = 0

  async function person(name: string, roles: Role[]): Promise<Actor> {
    const email = emailOf(name)
    const user = await em().transactional(async (tx) => {
      const made = tx.create(User, { email, name, roles, passwordHash: 'not a hash', handAllowanceMm: null, createdAt: new Date() })
      tx.persist(made)
      return made
    })
    return { id: user.id, name, email, roles, unit: 'mm', sessionId: crypto.randomUUID() }
  }
  const corin = await person('Corin Ashdown', ['admin'])
  const token: TestOffice['token'] = place => placeToken(harness.app, place)
  const again: TestOffice['again'] = ({ id }) => em().findOneOrFail(BenchPlace, { id }, { populate: ['person'] })

  async function ask(code: string, name: string): Promise<BenchPlace> {
    asks += 1
    await askForPlace(em(), harness.app, code, { name, email: emailOf(name), note: '' }, `10.1.${Math.floor(asks / 250)}.${asks % 250}`)
    const [place] = await em().find(BenchPlace, { cohort: { code }, email: emailOf(name) }, { orderBy: { createdAt: 'desc' }, limit: 1 })
    if (!place) throw new Error(`${name}'s ask was not kept`)
    return place
  }
  async function open(place: Pick<BenchPlace, 'id' | 'linkVersion'>): Promise<BenchPlace> {
    await openPlace(em(), harness.app, token(place))
    return again(place)
  }
  async function line(place: Pick<BenchPlace, 'id'>, purpose: PaymentPurpose, amountMinor: number, kind: LedgerKind = 'bank'): Promise<LedgerLine> {
    return em().transactional(async (tx) => {
      const now = harness.app.clock.schoolNow()
      const made = tx.create(LedgerLine, { place: tx.getReference(BenchPlace, place.id), kind, purpose, amountMinor, currency: 'GBP', payment: null, refund: null, reference: crypto.randomUUID(), by: tx.getReference(User, corin.id), at: now, writtenAt: now })
      tx.persist(made)
      return made
    })
  }

  return {
    em, corin, person, ask, open, token, again, line,
    wait: minutes => void (ahead += minutes * 60_000),
    async cohort(given) {
      return em().transactional(async (tx) => {
        const made = tx.create(Cohort, {
          name: given.code, startsOn: '2026-09-21', endsOn: '2026-12-18', pattern: 'weeks 1, 4, 7, 10, 13 on site', places: 8, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', lastListNumber: 0, createdAt: new Date(),
          ...given, course: tx.getReference(Course, course.id),
        })
        tx.persist(made)
        return made
      })
    },
    askAndOpen: async (code, name) => open(await ask(code, name)),
    async payDeposit(place, amountMinor = 35_000) {
      const paid = await line(place, 'deposit', amountMinor)
      return em().transactional(async tx => depositPaid(tx, harness.app, await tx.findOneOrFail(BenchPlace, { id: place.id }), paid))
    },
    mails: template => em().find(Mail, { template }, { orderBy: { createdAt: 'asc' } }),
  }
}
