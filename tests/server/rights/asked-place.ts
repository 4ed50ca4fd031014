import { randomUUID } from 'node:crypto'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Receipt } from '#server/db/entities/Receipt'
import { emptyPlace } from '#server/services/places/empty-place'
import { placeToken } from '#server/services/places/place-link'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import { receiptNumber } from '#shared/contract/receipt-number'
import type { World } from './world'

export interface AskedPlace { code: string, id: string, token: string, receipt: string }


/** A cohort that takes asks, and a place of it held for somebody without an account, with a receipt whose paper is not made yet. */
export async function askedPlace({ harness, school }: World, state: 'offered' | 'deposit-paid' = 'offered'): Promise<AskedPlace> {
  const startsOn = dayAfter(schoolDay(school.now()), 100)
  const code = randomUUID().slice(0, 8).toUpperCase()
  const { place, number } = await school.em().transactional(async (tx) => {
    const number = 900_000 + await tx.count(Receipt)
    const cohort = tx.create(Cohort, { code, name: 'Dorrow', startsOn, endsOn: dayAfter(startsOn, 90), pattern: 'evenings', places: 8, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', lastListNumber: 1, createdAt: school.now() })
    const made = tx.create(BenchPlace, { ...emptyPlace, cohort, name: 'Wen', email: `${code.toLowerCase()}@sallowbeck.example`, state, slot: 1, listNumber: 1, askedAt: school.now(), openedAt: school.now(), offeredAt: school.now(), heldUntil: new Date(school.now().getTime() + 1_800_000), createdAt: school.now() })
    const line = tx.create(LedgerLine, { place: made, kind: 'bank', purpose: 'deposit', amountMinor: 100, currency: 'GBP', payment: null, refund: null, reference: code, by: null, at: school.now(), writtenAt: school.now() })
    tx.create(Receipt, { number, line, key: null, sha256: null, issuedAt: school.now() })
    return { place: made, number }
  })
  return { code, id: place.id, token: placeToken(harness.app, place), receipt: receiptNumber(number) }
}
