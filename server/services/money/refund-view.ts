import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Refund } from '#server/db/entities/Refund'
import type { RefundView } from '#shared/contract/money'

/** Refunds as the office sees them, in the order given. */
export async function refundViews(em: EntityManager, refunds: readonly Refund[]): Promise<RefundView[]> {
  const places = new Map((await em.find(BenchPlace, { id: { $in: refunds.map(one => one.place.id) } }, { populate: ['cohort', 'person'] })).map(place => [place.id, place]))
  return refunds.flatMap((refund): RefundView[] => {
    const place = places.get(refund.place.id)
    if (!place) return []
    return [{
      id: refund.id, place: { id: place.id, name: place.person?.$.name ?? place.name, cohort: place.cohort.$.code }, purpose: refund.purpose, by: refund.payment ? 'card' : 'bank',
      amount: { minor: refund.amountMinor, currency: refund.currency }, rule: refund.rule, wording: refund.wording, sum: refund.sum, state: refund.state, problem: refund.problem ?? null, decidedAt: refund.decidedAt.toISOString(),
    }]
  })
}
