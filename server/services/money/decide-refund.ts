import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import { Payment, type PaymentPurpose } from '#server/db/entities/Payment'
import { Refund } from '#server/db/entities/Refund'
import { User } from '#server/db/entities/User'
import { lockPlace } from '#server/services/places/lock-place'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { RefundQuote } from '#shared/contract/money'
import { moneyOfPlace } from './money-of-place'

/** Rule, words and sum of a refund, and where its parts go. */
export type DecidedRefund = Pick<RefundQuote, 'rule' | 'wording' | 'sum' | 'parts'>

/**
 * Decides that money goes back: a row a part, and the work of sending those that go to a card. In the caller's transaction, with the
 * place held, so that two who decide at once do not give the same money twice.
 *
 * @param actor null when the school's own rule decides without a person
 * @throws {Refusal} refund_too_much when by now the school holds less than that, of the place or of a card
 */
export async function decideRefund(tx: EntityManager, app: App, actor: Pick<Actor, 'id'> | null, place: Pick<BenchPlace, 'id'>, { rule, wording, sum, parts }: DecidedRefund): Promise<Refund[]> {
  if (parts.length === 0) return []
  const locked = await lockPlace(tx, place.id)
  const money = await moneyOfPlace(tx, place.id)
  const leftOfCard = new Map(money.cards.map(card => [card.paymentId, card]))
  const left: Record<PaymentPurpose, number> = { ...money.held }
  for (const { paymentId, purpose, amount } of parts) {
    if (!Number.isSafeInteger(amount.minor) || amount.minor <= 0) throw new RangeError('decideRefund requires whole amounts above zero')
    left[purpose] -= amount.minor
    const card = paymentId === null ? null : leftOfCard.get(paymentId)
    if (card) card.leftMinor -= amount.minor
    if (left[purpose] < 0 || card === undefined || (card && (card.leftMinor < 0 || card.purpose !== purpose))) throw new Refusal('refund_too_much')
  }

  const decidedAt = app.clock.schoolNow()
  const refunds = parts.map(({ paymentId, purpose, amount }) => tx.create(Refund, {
    place: locked.place, payment: paymentId === null ? null : tx.getReference(Payment, paymentId), purpose, amountMinor: amount.minor, currency: amount.currency, rule, wording, sum,
    decidedBy: actor && tx.getReference(User, actor.id), decidedAt, state: 'decided', tries: 0, providerId: null, problem: null,
  }))
  tx.persist(refunds)
  for (const refund of refunds) {
    recordEvent(tx, { actor: actor?.id ?? 'school', action: 'refund-decided', subject: `place:${place.id}`, detail: { refund: refund.id, rule, amountMinor: refund.amountMinor, currency: refund.currency, by: refund.payment ? 'card' : 'bank' } })
  }
  await tx.flush()
  for (const refund of refunds.filter(one => one.payment)) await enqueue(app, tx, 'send-refund', { refundId: refund.id })
  return refunds
}
