import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'
import type { LedgerLine } from '#server/db/entities/LedgerLine'
import { Receipt } from '#server/db/entities/Receipt'
import { Refund } from '#server/db/entities/Refund'
import { schoolDay } from '#shared/contract/school-day'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import { dayAfter } from '#shared/domain/money/calendar-days'
import { coolingDays } from '#shared/domain/money/refund-rules'
import { payerOf, type Payer } from './payer-of'

/** All that a receipt and its letter say. */
export interface ReceiptFacts {
  receipt: Receipt
  line: LedgerLine
  place: BenchPlace
  cohort: Cohort
  payer: Payer | null
  receivedOn: string
  /** Paid toward the price before this line, and still to pay after it. */
  beforeMinor: number
  dueMinor: number
  dueOn: string
  /** The last day on which everything comes back; null when it is no deposit or the course has begun. */
  freeUntil: string | null
  /** All of it goes back: the place was gone, or was paid already. */
  goesBack: boolean
}

/** Reads them as they stood when the line was written. */
export async function receiptFacts(em: EntityManager, receiptId: string): Promise<ReceiptFacts> {
  const receipt = await em.findOneOrFail(Receipt, { id: receiptId }, { populate: ['line'] })
  const line = receipt.line.$
  const place = await em.findOneOrFail(BenchPlace, { id: line.place.id }, { populate: ['cohort'] })
  const cohort = place.cohort.$
  const [before] = await em.getConnection().execute<{ minor: number }[]>(
    `select coalesce(sum(amount_minor), 0)::int as minor from ledger_line where place_id = ? and purpose <> 'renewal' and written_at <= ? and id <> ?`, [place.id, line.writtenAt, line.id], 'all', em.getTransactionContext())
  const beforeMinor = before?.minor ?? 0
  const receivedOn = schoolDay(line.at)
  const lastFree = dayAfter(receivedOn, coolingDays)
  const lastBefore = dayAfter(cohort.startsOn, -1)
  const freeUntil = lastFree < lastBefore ? lastFree : lastBefore
  const back = line.payment ? await em.count(Refund, { payment: line.payment.id, rule: { $in: ['place-gone', 'paid-twice'] } }) : 0
  return {
    receipt, line, place, cohort, receivedOn, beforeMinor,
    payer: await payerOf(em, place.id),
    dueMinor: Math.max(0, cohort.priceMinor - beforeMinor - line.amountMinor),
    dueOn: balanceDueOn(cohort.startsOn, receivedOn),
    freeUntil: line.purpose === 'deposit' && freeUntil >= receivedOn ? freeUntil : null,
    goesBack: back > 0,
  }
}
