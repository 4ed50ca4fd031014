import type { EntityManager } from '@mikro-orm/postgresql'
import { Payment, type PaymentPurpose } from '#server/db/entities/Payment'
import { lockPlace } from '#server/services/places/lock-place'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { endCheckout } from './end-checkout'
import { openCheckout } from './open-checkout'
import { sumToPay } from './sum-to-pay'

/** The processor's page lasts from 30 minutes to 24 hours; both with something to spare for the way there. */
const shortestMs = 31 * 60_000
const longestMs = 23 * 3_600_000
/** Nobody is sent to a page that shuts while it loads. */
const leastLeftMs = 2 * 60_000
/** How often another sum or another's try may come between. */
const mostRounds = 4

/**
 * Begins to pay by card: the processor's page for what is due of a place. Asked again, the same page while it is open and the sum is
 * the same.
 *
 * The row comes first and the page after it is kept, under a key that comes from the row: whatever is cut in between, nobody is ever
 * sent to a page the school does not know of. So it must not run inside a transaction.
 *
 * @throws {Refusal} place_not_found, nothing_to_pay, hold_ran_out, place_state, checkout_refused
 * @throws {AdapterRefusal} payments_unreachable
 */
export async function beginPayment(em: EntityManager, app: App, placeId: string, purpose: PaymentPurpose): Promise<{ url: string }> {
  if (em.isInTransaction()) throw new Error('beginPayment inside a transaction: its row must be kept before the processor is asked')
  for (let round = 0; round < mostRounds; round += 1) {
    const { paymentId, fits } = await em.fork().transactional(tx => rowFor(tx, app, placeId, purpose))
    if (!fits) {
      await endCheckout(app, paymentId)
      continue
    }
    const url = await openCheckout(app, paymentId)
    if (url !== null) return { url }
  }
  throw new Refusal('checkout_refused')
}

/** The open payment of this purpose, or a new row; `fits` says whether it is for what is due now. */
async function rowFor(tx: EntityManager, app: App, placeId: string, purpose: PaymentPurpose): Promise<{ paymentId: string, fits: boolean }> {
  const { place, cohort } = await lockPlace(tx, placeId)
  const { amountMinor, withinMs } = await sumToPay(tx, app, place, cohort, purpose)
  const now = app.clock.now()
  const open = await tx.findOne(Payment, { place: place.id, purpose, state: { $in: ['begun', 'open'] } })
  if (open) return { paymentId: open.id, fits: open.amountMinor === amountMinor && open.currency === cohort.currency && open.expiresAt.getTime() - now.getTime() > leastLeftMs }

  const lastsMs = Math.max(shortestMs, Math.min(longestMs, withinMs ?? longestMs))
  const payment = tx.create(Payment, {
    place, purpose, amountMinor, currency: cohort.currency, state: 'begun', sessionId: null, intentId: null, url: null, paidAt: null, createdAt: now,
    // The processor counts in whole seconds.
    expiresAt: new Date(Math.floor((now.getTime() + lastsMs) / 1000) * 1000),
  })
  tx.persist(payment)
  recordEvent(tx, { actor: 'visitor', action: 'payment-begun', subject: `place:${place.id}`, detail: { payment: payment.id, purpose, amountMinor, currency: cohort.currency } })
  await tx.flush()
  return { paymentId: payment.id, fits: true }
}
