import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { ChargeState, CheckoutState } from '#server/adapters/payments/payments'
import { Payment } from '#server/db/entities/Payment'
import { lockPlace } from '#server/services/places/lock-place'
import type { App } from '#server/utils/app'
import { openCheckout } from './open-checkout'
import { writeCharge } from './write-charge'
import { writeRefund } from './write-refund'

/**
 * Brings what the school knows of a payment up to what the processor knows: asks how it stands, and writes down what is not in the
 * ledger yet. Messages, the page one comes back to and the sweep all end here, so it does not matter which come, how often, or in
 * which order. May be called at any time, any number of times.
 *
 * @throws {AdapterRefusal} payments_unreachable
 */
export async function applyPayment(app: App, paymentId: string): Promise<void> {
  const payment = await app.orm.em.fork().findOne(Payment, { id: paymentId })
  if (!payment) return
  if (payment.state === 'begun') await openCheckout(app, paymentId)
  const { sessionId } = await app.orm.em.fork().findOneOrFail(Payment, { id: paymentId })
  if (!sessionId) return
  // Asked before anything is locked: the processor may take its time.
  const checkout = await app.payments.readCheckout(sessionId)
  await app.orm.em.fork().transactional(tx => writeDown(tx, app, paymentId, checkout))
}

async function writeDown(tx: EntityManager, app: App, paymentId: string, checkout: CheckoutState): Promise<void> {
  const { place } = await tx.findOneOrFail(Payment, { id: paymentId })
  // Cohort, place, payment: the order everybody takes them in.
  const locked = await lockPlace(tx, place.id)
  const payment = await tx.findOneOrFail(Payment, { id: paymentId }, { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true })
  const came = checkout.charges.filter(charge => charge.paid)
  const first: ChargeState | undefined = came[0]
  payment.intentId = checkout.intentId ?? payment.intentId ?? null
  if (first) {
    payment.state = 'paid'
    payment.paidAt ??= first.at
    payment.url = null
  }
  else if (checkout.status === 'expired') {
    payment.state = 'expired'
    payment.url = null
  }
  await tx.flush()
  for (const charge of came) {
    await writeCharge(tx, app, payment, locked, charge)
    for (const refund of charge.refunds) await writeRefund(tx, app, payment, refund)
  }
}
