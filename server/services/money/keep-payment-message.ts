import type { EntityManager } from '@mikro-orm/postgresql'
import type { PaymentMessage } from '#server/adapters/payments/payments'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Payment } from '#server/db/entities/Payment'
import { PaymentEvent } from '#server/db/entities/PaymentEvent'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { isUuid } from '#server/utils/is-uuid'

/**
 * Keeps a message of the card processor, once, and with it the work of looking how the payment stands. One that is about nothing of
 * ours is kept and nothing follows.
 *
 * @returns whether it was new
 */
export function keepPaymentMessage(em: EntityManager, app: App, message: PaymentMessage): Promise<boolean> {
  return em.transactional(async (tx) => {
    const payment = await paymentOf(tx, message)
    // The primary key decides, whoever else keeps the same message at this moment.
    const written = await tx.createQueryBuilder(PaymentEvent).insert({
      id: message.id, type: message.type.slice(0, 120), about: payment ? message.about : null, happenedAt: message.at, receivedAt: app.clock.now(),
    }).onConflict('id').ignore().execute('run')
    if (written.affectedRows === 0) return false
    if (payment) await enqueue(app, tx, 'apply-payment', { paymentId: payment })
    return true
  })
}

/** Id of the payment a message is about. */
async function paymentOf(tx: EntityManager, { reference, about, intentId }: PaymentMessage): Promise<string | null> {
  const said = isUuid(reference) ? await tx.findOne(Payment, { id: reference }) : null
  if (said) return said.id
  const known = (about ? await tx.findOne(Payment, { sessionId: about }) : null) ?? (intentId ? await tx.findOne(Payment, { intentId }) : null)
  if (known) return known.id
  const line = about ? await tx.findOne(LedgerLine, { kind: { $in: ['card', 'card-refund'] }, reference: about }) : null
  return line?.payment?.id ?? null
}
