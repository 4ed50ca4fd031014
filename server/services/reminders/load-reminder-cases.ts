import type { EntityManager, FilterQuery, Loaded } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { ConsentText } from '#server/db/entities/Consent'
import { PurchaseOrder } from '#server/db/entities/Sponsor'
import { dueMinor, nothingPaid, placeMoney } from '#server/services/places/place-money'
import { consentStates } from '#server/services/safety/consent-states'
import { schoolDay } from '#shared/contract/school-day'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import type { ReminderCase } from './reminders-due'

export interface LoadedReminderCase { place: Loaded<BenchPlace, 'cohort' | 'person'>, of: ReminderCase }

/** The places a query finds, with all that their reminders follow from. */
export async function loadReminderCases(em: EntityManager, where: FilterQuery<BenchPlace>): Promise<LoadedReminderCase[]> {
  const places = await em.find(BenchPlace, where, { populate: ['cohort', 'person'], orderBy: { createdAt: 'asc', id: 'asc' } })
  if (places.length === 0) return []
  const ids = places.map(place => place.id)
  const paid = await placeMoney(em, ids)
  const orders = new Set((await em.find(PurchaseOrder, { place: { $in: ids } })).map(order => order.place.id))
  const consents = await consentStates(em, places.flatMap(place => place.person ? [place.person.id] : []))
  const [text] = await em.find(ConsentText, {}, { orderBy: { version: 'desc' }, limit: 1 })
  return places.map((place) => {
    const cohort = place.cohort.$
    const bookedOn = schoolDay(place.depositPaidAt ?? place.confirmedAt ?? place.createdAt)
    return {
      place,
      of: {
        state: place.state,
        bookedOn,
        startsOn: cohort.startsOn,
        balanceDueOn: balanceDueOn(cohort.startsOn, bookedOn),
        dueMinor: dueMinor(place.state, cohort, paid.get(place.id) ?? nothingPaid) ?? 0,
        ordered: orders.has(place.id),
        consent: (place.person && consents.get(place.person.id)) ?? 'none',
        consentSince: text?.standsFrom ?? 0,
        accessUntil: place.accessUntil ? schoolDay(place.accessUntil) : null,
      },
    }
  })
}
