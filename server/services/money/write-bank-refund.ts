import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { z } from 'zod'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { bankRefundInput, RefundView } from '#shared/contract/money'
import { schoolDay, startOfDay } from '#shared/contract/school-day'
import { holdRefund } from './hold-refund'
import { moneyOfPlace } from './money-of-place'
import { refundViews } from './refund-view'
import { refundWent } from './refund-went'

/**
 * Writes down that a decided refund went by bank, by the bank's reference, once: one that goes by bank, or one the card processor
 * refused. Its owner is told.
 *
 * @throws {Refusal} refund_not_found, refund_not_open, refund_too_much, day_to_come, bank_reference_used
 */
export async function writeBankRefund(em: EntityManager, app: App, actor: Pick<Actor, 'id'>, placeId: string, { refundId, reference, on }: z.output<typeof bankRefundInput>): Promise<RefundView | undefined> {
  if (on > schoolDay(app.clock.schoolNow())) throw new Refusal('day_to_come')
  try {
    return await em.transactional(async (tx) => {
      const refund = await holdRefund(tx, refundId, placeId)
      const byBank = refund.state === 'decided' && !refund.payment
      if (!byBank && refund.state !== 'refused') throw new Refusal('refund_not_open')
      // What was decided is held back already; what was refused is not, and may have gone another way.
      if (!byBank && refund.amountMinor > (await moneyOfPlace(tx, placeId)).held[refund.purpose]) throw new Refusal('refund_too_much')
      const line = tx.create(LedgerLine, {
        place: refund.place, kind: 'bank-refund', purpose: refund.purpose, amountMinor: -refund.amountMinor, currency: refund.currency, payment: null, refund, reference,
        by: tx.getReference(User, actor.id), at: startOfDay(on), writtenAt: app.clock.schoolNow(),
      })
      tx.persist(line)
      Object.assign(refund, { state: 'sent', problem: null })
      recordEvent(tx, { actor: actor.id, action: 'refund-went', subject: `place:${placeId}`, detail: { refund: refund.id, line: line.id, amountMinor: line.amountMinor } })
      await refundWent(tx, app, refund, line)
      return (await refundViews(tx, [refund]))[0]
    })
  }
  catch (thrown) {
    if (thrown instanceof UniqueConstraintViolationException && String(thrown.message).includes('ledger_line_kind_reference_unique')) throw new Refusal('bank_reference_used')
    throw thrown
  }
}
