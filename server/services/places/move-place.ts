import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { PurchaseOrder } from '#server/db/entities/Sponsor'
import { User } from '#server/db/entities/User'
import { firstName } from '#server/services/mail/first-name'
import { placeMoved } from '#server/services/mail/templates/place-moved'
import { writeMail } from '#server/services/mail/write-mail'
import { moneyOfPlace } from '#server/services/money/money-of-place'
import { quoteRefund } from '#server/services/money/quote-refund'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { MoveInput } from '#shared/contract/places'
import { schoolDay } from '#shared/contract/school-day'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import { withNote } from './cancel-place'
import { confirmWhenPaid } from './confirm-when-paid'
import { emptyPlace } from './empty-place'
import { lockCohort, lockPlace } from './lock-place'
import { notePlace } from './note-place'
import { placeLink } from './place-link'
import { dueMinor, nothingPaid, placeMoney } from './place-money'
import { settleOffers } from './settle-offers'

/**
 * Moves a booked place to another cohort, once, with all that was paid for it. The place it leaves goes to the waiting list in the same transaction;
 * in the cohort it goes to, whoever waits comes first.
 *
 * @returns id of the new place
 * @throws {Refusal} place_not_found, place_state, cohort_not_found, cohort_not_open, place_moved_once, move_not_allowed, no_free_place, place_in_cohort
 */
export async function movePlace(em: EntityManager, app: App, actor: Actor, id: string, { to, cause, note }: MoveInput): Promise<string> {
  try {
    return await em.transactional(tx => move(tx, app, actor, id, { to, cause, note }))
  }
  catch (thrown) {
    // Locked as they are, only another place of the same person in that cohort can be in the way.
    if (thrown instanceof UniqueConstraintViolationException) throw new Refusal('place_in_cohort')
    throw thrown
  }
}

async function move(tx: EntityManager, app: App, actor: Actor, id: string, { to, cause, note }: MoveInput): Promise<string> {
  const target = await lockBoth(tx, id, to)
  const { place, cohort } = await lockPlace(tx, id)
  if (place.state !== 'deposit-paid' && place.state !== 'confirmed' && place.state !== 'here') throw new Refusal('place_state')
  if (target.id === cohort.id) throw new Refusal('place_in_cohort')
  if (schoolDay(app.clock.schoolNow()) >= target.startsOn) throw new Refusal('cohort_not_open', 'That cohort has begun.')
  const quote = await quoteRefund(tx, app, place, { cause })
  if (!quote.mayMove) throw place.movedFromId ? new Refusal('place_moved_once') : new Refusal('move_not_allowed', `By the rule this place cannot be moved: ${quote.wording}`)
  const [slot] = await settleOffers(tx, app, target)
  if (slot === undefined) throw new Refusal('no_free_place')

  const now = app.clock.schoolNow()
  // Taken from a list: the office confirmed it before any money came.
  const onTrust = place.state !== 'deposit-paid' && ((await placeMoney(tx, [place.id])).get(place.id) ?? nothingPaid).paidMinor < cohort.priceMinor
  const moved = tx.create(BenchPlace, {
    ...emptyPlace, cohort: target, person: place.person ? tx.getReference(User, place.person.id) : null, name: place.name, email: place.email, note: withNote(place.note, note),
    // What was confirmed by money stays so only where it covers the new price.
    state: 'deposit-paid', slot, askedAt: place.askedAt, openedAt: place.openedAt, depositPaidAt: place.depositPaidAt, movedFromId: place.id, createdAt: new Date(),
  })
  notePlace(tx, place, actor, 'place-moved-away', { to: target.code, place: moved.id, from: place.state, slot: place.slot })
  Object.assign(place, { state: 'moved', slot: null, endedAt: now, endedBecause: cause })
  await tx.flush()
  tx.persist(moved)
  notePlace(tx, moved, actor, 'place-moved-here', { from: cohort.code, place: place.id, slot })
  await tx.flush()
  await moveMoney(tx, actor, place, moved, target.currency, now)
  const order = await tx.findOne(PurchaseOrder, { place: place.id })
  if (order) order.place = tx.getReference(BenchPlace, moved.id, { wrapped: true })
  if (order || onTrust) Object.assign(moved, { state: 'confirmed', confirmedAt: now })
  await confirmWhenPaid(tx, app, moved, target, actor)
  await settleOffers(tx, app, cohort, { freed: true })

  const paid = (await placeMoney(tx, [moved.id])).get(moved.id) ?? nothingPaid
  const due = order ? null : dueMinor(moved.state, target, paid)
  const amount = (minor: number) => ({ minor, currency: target.currency })
  await writeMail(tx, app, {
    key: `place-moved:${moved.id}`, template: 'place-moved', to: { id: moved.person?.id ?? null, email: moved.email },
    letter: placeMoved({ first: firstName(moved.name), from: cohort.name, to: target.name, startsOn: target.startsOn, paid: amount(paid.paidMinor), due: due === null ? null : amount(due), dueOn: balanceDueOn(target.startsOn), url: placeLink(app, moved) }),
  })
  return moved.id
}

/** Holds both cohorts, always in the same order, and answers the one it goes to. */
async function lockBoth(tx: EntityManager, placeId: string, code: string): Promise<Cohort> {
  const place = await tx.findOne(BenchPlace, { id: placeId })
  if (!place) throw new Refusal('place_not_found')
  const target = await tx.findOne(Cohort, { code })
  if (!target) throw new Refusal('cohort_not_found')
  for (const cohortId of [place.cohort.id, target.id].sort()) await lockCohort(tx, { id: cohortId })
  return target
}

/** A pair of lines a purpose: out here, in there, together nothing. Refunds that are decided and have not gone stay behind. */
async function moveMoney(tx: EntityManager, actor: Actor, from: BenchPlace, to: BenchPlace, currency: string, at: Date): Promise<void> {
  const { held } = await moneyOfPlace(tx, from.id)
  for (const purpose of ['deposit', 'balance'] as const) {
    const amountMinor = held[purpose]
    if (amountMinor <= 0) continue
    const common = { purpose, currency, payment: null, refund: null, reference: `move:${to.id}:${purpose}`, by: tx.getReference(User, actor.id), at, writtenAt: at }
    tx.persist(tx.create(LedgerLine, { ...common, place: from, kind: 'moved-out', amountMinor: -amountMinor }))
    tx.persist(tx.create(LedgerLine, { ...common, place: to, kind: 'moved-in', amountMinor }))
  }
  await tx.flush()
}
