import { Payment } from '#server/db/entities/Payment'
import type { App } from '#server/utils/app'
import { applyPayment } from './apply-payment'

/**
 * Shuts the page of a payment that is not wanted any more. Whether it was paid in that very moment the processor says, and that is
 * what is written down.
 *
 * @throws {AdapterRefusal} payments_unreachable
 */
export async function endCheckout(app: App, paymentId: string): Promise<void> {
  const before = await app.orm.em.fork().findOneOrFail(Payment, paymentId)
  // One that was never heard of may have a page all the same.
  if (before.state === 'begun') await applyPayment(app, paymentId)
  const payment = await app.orm.em.fork().findOneOrFail(Payment, paymentId)
  if (payment.sessionId && payment.state === 'open') await app.payments.expireCheckout(payment.sessionId)
  await applyPayment(app, paymentId)
}
