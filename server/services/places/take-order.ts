import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { PurchaseOrder, Sponsor } from '#server/db/entities/Sponsor'
import { User } from '#server/db/entities/User'
import { orderReceived } from '#server/services/mail/templates/order-received'
import { writeMail } from '#server/services/mail/write-mail'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { OrderInput } from '#shared/contract/places'
import { schoolDay } from '#shared/contract/school-day'
import { lockPlace } from './lock-place'
import { makeAccount } from './make-account'
import { notePlace } from './note-place'
import { dueMinor, nothingPaid, placeMoney } from './place-money'
import { takesBench } from './place-states'
import { settleOffers } from './settle-offers'

/** Days a sponsor has to pay (handbook 5.4). */
const termsMs = 30 * 24 * 3_600_000

/**
 * Takes a sponsor's purchase order for a place: the place is confirmed from the order on, not from its payment. The student gets an account,
 * the sponsor a message.
 *
 * @throws {Refusal} place_not_found, place_state, no_free_place, order_known, order_too_small
 */
export async function takeOrder(em: EntityManager, app: App, actor: Actor, id: string, input: OrderInput): Promise<void> {
  try {
    await em.transactional(tx => take(tx, app, actor, id, input))
  }
  catch (thrown) {
    if (thrown instanceof UniqueConstraintViolationException) throw new Refusal('order_known')
    throw thrown
  }
}

async function take(tx: EntityManager, app: App, actor: Actor, id: string, { organisation, contact, email, number, amountMinor }: OrderInput): Promise<void> {
  const { place, cohort } = await lockPlace(tx, id)
  if (!['asked', 'waiting-list', 'offered', 'deposit-paid'].includes(place.state)) throw new Refusal('place_state')
  const paid = (await placeMoney(tx, [id])).get(id) ?? nothingPaid
  const due = dueMinor('confirmed', cohort, paid)
  if (due !== null && amountMinor < due) throw new Refusal('order_too_small')
  const slots = await settleOffers(tx, app, cohort)
  if (!takesBench(place.state)) {
    const [slot] = slots
    if (slot === undefined) throw new Refusal('no_free_place')
    place.slot = slot
  }
  const sponsor = await findOrMakeSponsor(tx, { organisation, contact, email })
  const receivedAt = app.clock.schoolNow()
  const dueAt = new Date(receivedAt.getTime() + termsMs)
  const order = tx.create(PurchaseOrder, { place, sponsor, number, amountMinor, currency: cohort.currency, receivedAt, dueAt, takenBy: tx.getReference(User, actor.id) })
  tx.persist(order)
  Object.assign(place, { state: 'confirmed', offeredAt: null, heldUntil: null, confirmedAt: receivedAt })
  notePlace(tx, place, actor, 'place-order-taken', { order: number, sponsor: sponsor.id, minor: amountMinor, slot: place.slot })
  await tx.flush()
  await makeAccount(tx, app, place, actor)
  await writeMail(tx, app, {
    key: `order-received:${order.id}`, template: 'order-received', to: { id: null, email },
    letter: orderReceived({
      contact, student: place.name, cohort: cohort.name, startsOn: cohort.startsOn, number, amount: { minor: amountMinor, currency: cohort.currency }, dueOn: schoolDay(dueAt),
      rulesUrl: `${app.config.publicUrl}/cohorts/${cohort.code}`,
    }),
  })
}

/** The sponsor of that name, with who answers for it now. */
async function findOrMakeSponsor(tx: EntityManager, { organisation, contact, email }: Pick<OrderInput, 'organisation' | 'contact' | 'email'>): Promise<Sponsor> {
  await tx.createQueryBuilder(Sponsor).insert({ id: crypto.randomUUID(), organisation, contact, email, createdAt: new Date() }).onConflict('organisation').merge({ contact, email }).execute('run')
  return tx.findOneOrFail(Sponsor, { organisation }, { refresh: true })
}
