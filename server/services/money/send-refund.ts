import { LockMode } from '@mikro-orm/core'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Refund } from '#server/db/entities/Refund'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { refuseRefund } from './refuse-refund'

/**
 * Asks the card processor for one decided refund. The key it is asked by comes from the row, so a try whose answer was lost is not a
 * second refund. The ledger line is written when the processor's own list says so (`apply-payment`).
 *
 * What the processor will never do ends as `refused` with its words, and stands on the office's list.
 *
 * @throws {AdapterRefusal} payments_unreachable, so that the job is tried again
 */
export async function sendRefund(app: App, refundId: string): Promise<void> {
  const em = app.orm.em.fork()
  const refund = await em.findOne(Refund, { id: refundId, state: 'decided', payment: { $ne: null } }, { populate: ['payment'] })
  const payment = refund?.payment?.$
  if (!refund || !payment) return
  const charge = await em.findOne(LedgerLine, { payment: payment.id, kind: 'card' }, { orderBy: { at: 'desc' } })
  const answer = await app.payments.refund({
    ...(charge ? { chargeId: charge.reference } : { intentId: payment.intentId ?? undefined }),
    amountMinor: refund.amountMinor,
    key: `refund:${refund.id}:${refund.tries}`,
    reference: refund.id,
  })

  await app.orm.em.fork().transactional(async (tx) => {
    const row = await tx.findOneOrFail(Refund, { id: refundId }, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (row.state !== 'decided' || row.tries !== refund.tries) return
    if (answer.state === 'refused' || answer.state === 'failed') {
      await refuseRefund(tx, app, row, { problem: answer.problem, providerId: 'id' in answer ? answer.id : null })
      return
    }
    Object.assign(row, { state: 'sent', providerId: answer.id, problem: null })
    recordEvent(tx, { actor: 'job', action: 'refund-sent', subject: `place:${row.place.id}`, detail: { refund: row.id, provider: answer.id } })
    await enqueue(app, tx, 'apply-payment', { paymentId: payment.id })
  })
}
