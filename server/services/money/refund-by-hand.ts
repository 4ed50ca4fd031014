import type { EntityManager } from '@mikro-orm/postgresql'
import type { z } from 'zod'
import { lockPlace } from '#server/services/places/lock-place'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { moneyText, type HandRefundAnswer } from '#shared/contract/money'
import type { handRefundInput } from '#shared/contract/places'
import { plainAmount } from '#shared/domain/money/plain-amount'
import { decideRefund } from './decide-refund'
import { moneyOfPlace } from './money-of-place'
import { refundViews } from './refund-view'
import { splitRefund } from './split-refund'

/** Of which money a free amount is taken first: what was paid last. */
const order = ['renewal', 'balance', 'deposit'] as const

/**
 * Gives back an amount a person decided on, for a reason they say; never more than the school holds of the place. It goes to the cards
 * that paid, newest first, and where no card paid, by bank.
 *
 * @throws {Refusal} place_not_found, refund_too_much with what is left
 */
export async function refundByHand(em: EntityManager, app: App, actor: Pick<Actor, 'id'>, placeId: string, { amountMinor, reason }: z.output<typeof handRefundInput>): Promise<HandRefundAnswer> {
  return em.transactional(async (tx) => {
    const { cohort: { currency } } = await lockPlace(tx, placeId)
    const money = await moneyOfPlace(tx, placeId)
    const left = order.reduce((sum, purpose) => sum + Math.max(0, money.held[purpose]), 0)
    if (amountMinor > left) throw new Refusal('refund_too_much', `The school holds ${moneyText({ minor: left, currency })} of this place; more than that cannot go back.`, { left: { minor: left, currency } })

    let rest = amountMinor
    const parts = order.flatMap((purpose) => {
      const part = Math.min(rest, Math.max(0, money.held[purpose]))
      rest -= part
      return splitRefund(money, purpose, part)
    })
    const refunds = await decideRefund(tx, app, actor, { id: placeId }, {
      rule: 'by-hand', wording: reason, sum: `${plainAmount(left)} held - ${plainAmount(left - amountMinor)} kept = ${plainAmount(amountMinor)} back`,
      parts: parts.map(part => ({ paymentId: part.paymentId, purpose: part.purpose, amount: { minor: part.amountMinor, currency } })),
    })
    return { refunds: await refundViews(tx, refunds), left: { minor: left - amountMinor, currency } }
  })
}
