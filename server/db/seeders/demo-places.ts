import type { EntityManager } from '@mikro-orm/core'
import { AuditEvent } from '../entities/AuditEvent'
import { BenchPlace, takingStates, type PlaceState } from '../entities/BenchPlace'
import { Cohort } from '../entities/Cohort'
import { LedgerLine, type LedgerKind } from '../entities/LedgerLine'
import type { PaymentPurpose } from '../entities/Payment'
import { PurchaseOrder, Sponsor } from '../entities/Sponsor'
import type { User } from '../entities/User'
import type { SchoolContent } from './content'

const day = 24 * 3_600_000
/** Ten in the morning of a day: when the office opens the bank's statement. Its zone is within an hour of UTC. */
const morning = (date: string): Date => new Date(`${date}T10:00:00Z`)
const minor = (pounds: number): number => Math.round(pounds * 100)

/** Every cohort with what it costs; those still to come take asks. */
export function makeCohorts(em: EntityManager, { scenario, start }: SchoolContent, until: Date): Map<string, Cohort> {
  const all = [...start.earlierCohorts, ...scenario.cohorts]
  return new Map(all.map(({ code, name, start: startsOn, end: endsOn, pattern, places }) => [code, em.create(Cohort, {
    code, name, startsOn, endsOn, pattern, places, open: until < morning(startsOn), priceMinor: minor(scenario.prices.course_full), depositMinor: minor(scenario.prices.place_deposit),
    currency: scenario.school.currency, createdAt: new Date(morning(startsOn).getTime() - 180 * day),
  })]))
}

/**
 * Bench places as they stand at the instant, with what was paid for them until then: by bank, since no card processor has ever seen the
 * demo's people; Agnes's deposit moved with her, Callum's balance late and in two parts, Dele's place held by his sponsor's order.
 */
export function makePlaces(em: EntityManager, content: SchoolContent, people: ReadonlyMap<string, User>, cohorts: ReadonlyMap<string, Cohort>, until: Date): void {
  const { scenario, start } = content
  const corin = scenario.staff.find(one => one.role === 'school admin')
  const office = corin && people.get(corin.name)
  if (!office) throw new Error('content/school/scenario.json has no school admin')
  const desk: Desk = { em, until, office, content }
  const cohortOf = (code: string): Cohort => need(cohorts.get(code), code)
  const personOf = (name: string): User => need(people.get(name), name)

  const taken = new Map<string, number>()
  const nextSlot = (code: string, own?: number): number => {
    const slot = own ?? (taken.get(code) ?? 0) + 1
    taken.set(code, slot)
    return slot
  }
  for (const { name, cohort: code, moved_to: movedTo } of scenario.students) {
    const moved = start.moved[name]
    if (moved && movedTo) {
      makeMoved(desk, personOf(name), cohortOf(code), cohortOf(movedTo), { ...moved, slot: until >= new Date(moved.at) ? moved.slot : nextSlot(code) })
      continue
    }
    const cohort = cohortOf(code)
    const place = makePlace(desk, personOf(name), cohort, usualState(cohort, until), nextSlot(code, start.students[name]?.slot))
    if (scenario.sponsor.sponsors.includes(name)) makeOrder(desk, place, cohort, need(start.orders[name], name))
    else payAsUsual(desk, place, cohort, start.lateBalances[name])
  }
  for (const { name, cohort: code } of scenario.alumni) {
    const cohort = cohortOf(code)
    payAsUsual(desk, makePlace(desk, personOf(name), cohort, usualState(cohort, until), nextSlot(code)), cohort)
  }
}

interface Desk { em: EntityManager, until: Date, office: User, content: SchoolContent }

function need<Value>(found: Value | undefined, name: string): Value {
  if (found === undefined) throw new Error(`content/school names ${name}, who or which is not there`)
  return found
}

/** Of somebody who neither moved nor cancelled: paid before the start, here while it runs, finished after. */
function usualState({ startsOn, endsOn }: Cohort, until: Date): PlaceState {
  return until < new Date(`${startsOn}T00:00:00Z`) ? 'confirmed' : until.getTime() < Date.parse(`${endsOn}T00:00:00Z`) + day ? 'here' : 'finished'
}

function makePlace({ em, office, content }: Desk, person: User, cohort: Cohort, state: PlaceState, slot: number | null): BenchPlace {
  const finishedAt = state === 'finished' ? new Date(`${cohort.endsOn}T00:00:00Z`) : null
  const accessUntil = finishedAt && new Date(finishedAt)
  accessUntil?.setUTCFullYear(accessUntil.getUTCFullYear() + content.scenario.prices.alumni_access_years_included)
  const place = em.create(BenchPlace, {
    cohort, person, name: person.name, email: person.email, state, slot: takingStates.includes(state) ? slot : null, createdAt: new Date(morning(cohort.startsOn).getTime() - 120 * day), finishedAt, accessUntil,
  })
  if (state === 'here' || state === 'finished') note(em, place, office, 'place-here', '{}', new Date(`${cohort.startsOn}T09:00:00Z`))
  if (finishedAt) note(em, place, office, 'place-finished', '{}', finishedAt)
  return place
}

function note(em: EntityManager, place: BenchPlace, office: User, action: string, detail: string, at: Date): void {
  em.create(AuditEvent, { actor: office.id, action, subject: `place:${place.id}`, detail, at })
}

/** Money written down from the bank's statement, if that day has come. @returns whether it has */
function pay({ em, until, office }: Desk, place: BenchPlace, purpose: PaymentPurpose, amountMinor: number, at: Date, kind: LedgerKind = 'bank', reference = `${place.name}, ${purpose} ${at.toISOString().slice(0, 10)}`): boolean {
  if (at > until) return false
  em.create(LedgerLine, { place, kind, purpose, amountMinor, currency: 'GBP', payment: null, refund: null, reference, by: office, at, writtenAt: at })
  return true
}

function payAsUsual(desk: Desk, place: BenchPlace, cohort: Cohort, late?: { on: string, minor: number }[]): void {
  const before = (days: number) => new Date(morning(cohort.startsOn).getTime() - days * day)
  const depositAt = before(100)
  if (!pay(desk, place, 'deposit', cohort.depositMinor, depositAt)) {
    // Confirmed on trust: nobody of the story is without a place before its first payment.
    return
  }
  place.depositPaidAt = depositAt
  note(desk.em, place, desk.office, 'place-deposit-paid', '{}', depositAt)
  const parts = late?.map(part => ({ at: morning(part.on), minor: part.minor })) ?? [{ at: before(30), minor: cohort.priceMinor - cohort.depositMinor }]
  const paid = parts.filter(part => pay(desk, place, 'balance', part.minor, part.at))
  const last = paid.at(-1)
  if (!last || paid.length < parts.length) {
    if (place.state === 'confirmed') place.state = 'deposit-paid'
    return
  }
  place.confirmedAt = last.at
  note(desk.em, place, desk.office, 'place-confirmed', '{}', last.at)
}

function makeMoved(desk: Desk, person: User, from: Cohort, to: Cohort, moved: { at: string, slot: number, depositPaidOn: string }): void {
  const { em, until, office } = desk
  const at = new Date(moved.at)
  const paidAt = morning(moved.depositPaidOn)
  const gone = until >= at
  const first = makePlace(desk, person, from, gone ? 'moved' : 'deposit-paid', moved.slot)
  first.depositPaidAt = paidAt
  pay(desk, first, 'deposit', from.depositMinor, paidAt)
  note(em, first, office, 'place-deposit-paid', '{}', paidAt)
  if (!gone) return
  Object.assign(first, { endedAt: at, endedBecause: 'student' })
  const second = makePlace(desk, person, to, 'deposit-paid', moved.slot)
  Object.assign(second, { depositPaidAt: paidAt, movedFromId: first.id })
  pay(desk, first, 'deposit', -from.depositMinor, at, 'moved-out', `move:${second.id}:deposit`)
  pay(desk, second, 'deposit', from.depositMinor, at, 'moved-in', `move:${second.id}:deposit`)
  note(em, first, office, 'place-moved-away', JSON.stringify({ to: to.code }), at)
  note(em, second, office, 'place-moved-here', JSON.stringify({ from: from.code }), at)
}

function makeOrder(desk: Desk, place: BenchPlace, cohort: Cohort, order: { number: string, receivedOn: string, paidOn: string, email: string }): void {
  const { em, until, office, content } = desk
  const receivedAt = morning(order.receivedOn)
  if (receivedAt > until) return
  const sponsor = em.create(Sponsor, { organisation: content.scenario.sponsor.organisation.replace(/ \(invented\)$/, ''), contact: content.scenario.sponsor.contact, email: order.email, createdAt: receivedAt })
  em.create(PurchaseOrder, { place, sponsor, number: order.number, amountMinor: cohort.priceMinor, currency: cohort.currency, receivedAt, dueAt: new Date(receivedAt.getTime() + content.scenario.prices.sponsor_invoice_terms_days * day), takenBy: office })
  place.confirmedAt = receivedAt
  note(em, place, office, 'place-order-taken', JSON.stringify({ order: order.number }), receivedAt)
  const paidAt = morning(order.paidOn)
  pay(desk, place, 'deposit', cohort.depositMinor, paidAt, 'bank', `${order.number}, deposit`)
  pay(desk, place, 'balance', cohort.priceMinor - cohort.depositMinor, paidAt, 'bank', `${order.number}, balance`)
}
