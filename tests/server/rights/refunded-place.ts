import { randomUUID } from 'node:crypto'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Receipt } from '#server/db/entities/Receipt'
import { Refund } from '#server/db/entities/Refund'
import { User } from '#server/db/entities/User'
import { emptyPlace } from '#server/services/places/empty-place'
import type { Actor } from '#server/utils/actor'
import { receiptNumber } from '#shared/contract/receipt-number'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import type { World } from './world'

export interface RefundedPlace { id: string, refund: string, receipt: string }

/** A place of this person's in a cohort of its own, paid by bank, with a receipt whose paper is not made yet and a refund by bank that has not gone. */
export async function refundedPlace({ school }: World, owner: Pick<Actor, 'id'>): Promise<RefundedPlace> {
  const startsOn = dayAfter(schoolDay(school.now()), 100)
  const code = randomUUID().slice(0, 8).toUpperCase()
  return school.em().transactional(async (tx) => {
    const number = 900_000 + await tx.count(Receipt)
    const cohort = tx.create(Cohort, { code, name: 'Dorrow', startsOn, endsOn: dayAfter(startsOn, 90), pattern: 'evenings', places: 8, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', createdAt: school.now() })
    const place = tx.create(BenchPlace, { ...emptyPlace, cohort, person: tx.getReference(User, owner.id), name: '', email: '', state: 'deposit-paid', slot: 1, createdAt: school.now() })
    const line = tx.create(LedgerLine, { place, kind: 'bank', purpose: 'deposit', amountMinor: 35_000, currency: 'GBP', payment: null, refund: null, reference: code, by: null, at: school.now(), writtenAt: school.now() })
    tx.create(Receipt, { number, line, key: null, sha256: null, issuedAt: school.now() })
    const refund = tx.create(Refund, { place, payment: null, purpose: 'deposit', amountMinor: 100, currency: 'GBP', rule: 'by-hand', wording: 'A pound.', sum: '1.00 back', decidedBy: null, decidedAt: school.now(), state: 'decided', tries: 0, providerId: null, problem: null })
    return { id: place.id, refund: refund.id, receipt: receiptNumber(number) }
  })
}
