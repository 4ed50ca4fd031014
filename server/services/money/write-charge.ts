import type { EntityManager } from '@mikro-orm/postgresql'
import type { ChargeState } from '#server/adapters/payments/payments'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import type { Payment } from '#server/db/entities/Payment'
import { balancePaid } from '#server/services/places/balance-paid'
import { depositPaid } from '#server/services/places/deposit-paid'
import type { LockedPlace } from '#server/services/places/lock-place'
import { nothingPaid, placeMoney } from '#server/services/places/place-money'
import { takesBench } from '#server/services/places/place-states'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { moneyText } from '#shared/contract/money'
import { decideRefund } from './decide-refund'
import { issueReceipt } from './issue-receipt'
import { renewAccess } from './renew-access'
import { schoolInstant } from './school-instant'

type Outcome = 'booked' | 'no-place' | 'paid-twice'

const givenBack: Record<Exclude<Outcome, 'booked'>, { rule: string, wording: string }> = {
  'no-place': { rule: 'place-gone', wording: 'The place was gone when the payment came, so all of it goes back.' },
  'paid-twice': { rule: 'paid-twice', wording: 'The deposit was paid already, so all of the second payment goes back.' },
}

/**
 * Writes a charge into the ledger, once, and does what follows from it: the place is booked, the receipt numbered; or, where the
 * place is gone, all of it is given back. Place and payment are held by the caller.
 */
export async function writeCharge(tx: EntityManager, app: App, payment: Payment, { place, cohort }: LockedPlace, charge: ChargeState): Promise<void> {
  if (await tx.findOne(LedgerLine, { kind: 'card', reference: charge.id })) return
  const before = (await placeMoney(tx, [place.id])).get(place.id) ?? nothingPaid
  const line = tx.create(LedgerLine, {
    place, kind: 'card', purpose: payment.purpose, amountMinor: charge.amountMinor, currency: charge.currency, payment, refund: null, reference: charge.id, by: null,
    at: schoolInstant(app, charge.at), writtenAt: app.clock.schoolNow(),
  })
  tx.persist(line)
  recordEvent(tx, { actor: 'job', action: 'payment-came', subject: `place:${place.id}`, detail: { payment: payment.id, purpose: payment.purpose, charge: charge.id, amountMinor: charge.amountMinor } })
  await tx.flush()

  const outcome = await follow()
  await tx.flush()
  await issueReceipt(tx, app, line)
  if (outcome === 'booked') return
  const amount = { minor: charge.amountMinor, currency: charge.currency }
  await decideRefund(tx, app, null, place, {
    ...givenBack[outcome], sum: `${moneyText(amount)} paid, ${moneyText(amount)} back`, parts: [{ paymentId: payment.id, purpose: payment.purpose, amount }],
  })

  async function follow(): Promise<Outcome> {
    if (payment.purpose === 'renewal') return renewAccess(tx, app, place)
    if (payment.purpose === 'balance') return balancePaid(tx, app, place, line)
    // A transfer may have come while the card was being paid.
    if (place.state !== 'offered' && takesBench(place.state) && before.depositMinor >= cohort.depositMinor) return 'paid-twice'
    return depositPaid(tx, app, place, line)
  }
}
