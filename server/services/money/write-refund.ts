import type { EntityManager } from '@mikro-orm/postgresql'
import type { RefundState } from '#server/adapters/payments/payments'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import type { Payment } from '#server/db/entities/Payment'
import { Refund } from '#server/db/entities/Refund'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { isUuid } from '#server/utils/is-uuid'
import { refundWent } from './refund-went'
import { refuseRefund } from './refuse-refund'
import { schoolInstant } from './school-instant'

/**
 * Writes a refund that went into the ledger, once, and tells its owner. One that somebody made at the processor, without a decision
 * here, is written down as what it is. The payment is held by the caller.
 */
export async function writeRefund(tx: EntityManager, app: App, payment: Payment, state: RefundState): Promise<void> {
  const refund = await decided(tx, payment, state)
  if (state.state === 'failed' && refund) await refuseRefund(tx, app, refund, { problem: state.problem, providerId: state.id })
  if (state.state !== 'succeeded' || await tx.findOne(LedgerLine, { kind: 'card-refund', reference: state.id })) return

  const place = refund ? refund.place.id : await movedTo(tx, payment.place.id)
  const line = tx.create(LedgerLine, {
    place: tx.getReference(BenchPlace, place), kind: 'card-refund', purpose: payment.purpose, amountMinor: -state.amountMinor, currency: state.currency, payment, refund, reference: state.id, by: null,
    at: schoolInstant(app, state.at), writtenAt: app.clock.schoolNow(),
  })
  tx.persist(line)
  if (refund) Object.assign(refund, { state: 'sent', providerId: state.id, problem: null })
  recordEvent(tx, { actor: 'job', action: 'refund-went', subject: `place:${place}`, detail: { payment: payment.id, refund: refund?.id ?? null, provider: state.id, amountMinor: state.amountMinor } })
  await tx.flush()
  if (refund) await refundWent(tx, app, refund, line)
}

/** Our decision behind a refund of the processor's, by what we called it when we asked, or by the id it gave. */
async function decided(tx: EntityManager, payment: Payment, state: RefundState): Promise<Refund | null> {
  const named = isUuid(state.reference) ? await tx.findOne(Refund, { id: state.reference, payment: payment.id }, { refresh: true }) : null
  return named ?? await tx.findOne(Refund, { providerId: state.id, payment: payment.id }, { refresh: true })
}

/** The place the money of a place has gone to by moves. */
async function movedTo(tx: EntityManager, placeId: string): Promise<string> {
  const next = await tx.findOne(BenchPlace, { movedFromId: placeId })
  return next ? movedTo(tx, next.id) : placeId
}
