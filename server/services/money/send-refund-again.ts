import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { RefundView } from '#shared/contract/money'
import { holdRefund } from './hold-refund'
import { moneyOfPlace } from './money-of-place'
import { refundViews } from './refund-view'

/**
 * Asks the card processor again for a refund it refused, under a new key: under the old one it would only say the same.
 *
 * @throws {Refusal} refund_not_found, refund_not_open, refund_too_much when the money went another way meanwhile
 */
export async function sendRefundAgain(em: EntityManager, app: App, actor: Pick<Actor, 'id'>, refundId: string): Promise<RefundView | undefined> {
  return em.transactional(async (tx) => {
    const refund = await holdRefund(tx, refundId)
    if (refund.state !== 'refused' || !refund.payment) throw new Refusal('refund_not_open')
    const money = await moneyOfPlace(tx, refund.place.id)
    const card = money.cards.find(one => one.paymentId === refund.payment?.id)
    if (refund.amountMinor > money.held[refund.purpose] || refund.amountMinor > (card?.leftMinor ?? 0)) throw new Refusal('refund_too_much')
    Object.assign(refund, { state: 'decided', tries: refund.tries + 1, providerId: null, problem: null })
    recordEvent(tx, { actor: actor.id, action: 'refund-sent-again', subject: `place:${refund.place.id}`, detail: { refund: refund.id } })
    await enqueue(app, tx, 'send-refund', { refundId })
    return (await refundViews(tx, [refund]))[0]
  })
}
