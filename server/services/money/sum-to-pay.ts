import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'
import type { PaymentPurpose } from '#server/db/entities/Payment'
import { PurchaseOrder } from '#server/db/entities/Sponsor'
import { nothingPaid, placeMoney } from '#server/services/places/place-money'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { renewalMinor } from '#shared/contract/money'

/**
 * What may be paid by card for a place now.
 *
 * @returns the sum, and for a held place how long the hold still runs: a payment page should not outlive it
 * @throws {Refusal} nothing_to_pay, hold_ran_out, place_state
 */
export async function sumToPay(em: EntityManager, app: Pick<App, 'clock'>, place: BenchPlace, cohort: Cohort, purpose: PaymentPurpose): Promise<{ amountMinor: number, withinMs: number | null }> {
  const paid = (await placeMoney(em, [place.id])).get(place.id) ?? nothingPaid
  const booked = place.state === 'deposit-paid' || place.state === 'confirmed' || place.state === 'here'
  const due = (amountMinor: number, withinMs: number | null = null) => {
    if (amountMinor <= 0) throw new Refusal('nothing_to_pay')
    return { amountMinor, withinMs }
  }
  switch (purpose) {
    case 'deposit': {
      if (booked || place.state === 'finished') throw new Refusal('nothing_to_pay')
      if (place.state !== 'offered' || !place.heldUntil) throw new Refusal(place.state === 'waiting-list' ? 'hold_ran_out' : 'place_state')
      const leftMs = place.heldUntil.getTime() - app.clock.schoolNow().getTime()
      if (leftMs <= 0) throw new Refusal('hold_ran_out')
      return due(cohort.depositMinor - paid.depositMinor, leftMs)
    }
    case 'balance': {
      if (!booked && place.state !== 'finished') throw new Refusal('place_state')
      // What a sponsor ordered is the sponsor's to pay.
      const order = await em.findOne(PurchaseOrder, { place: place.id })
      return due(cohort.priceMinor - paid.paidMinor - (order?.amountMinor ?? 0))
    }
    case 'renewal': {
      if (place.state !== 'finished') throw new Refusal('place_state')
      return due(renewalMinor)
    }
  }
}
