import type { EntityManager } from '@mikro-orm/postgresql'
import { schoolDay } from '#shared/contract/school-day'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findLinkedPlace } from './find-linked-place'
import { lockPlace } from './lock-place'
import { notePlace } from './note-place'
import { holdMs, offerPlace } from './offer-place'
import { settleOffers } from './settle-offers'

/**
 * What opening the mailed link does: the address is real, so a free bench is held for 30 minutes, and where none is free the asker
 * takes the turn on the waiting list that the ask gave. Whoever waits has the first claim to a free bench. Opening again changes nothing, but
 * for somebody on the list who finds a bench free that everybody before let go.
 *
 * @throws {Refusal} place_link_unknown, cohort_not_open, offer_open
 */
export async function openPlace(em: EntityManager, app: App, token: string): Promise<void> {
  const { id } = await findLinkedPlace(em, app, token)
  await em.fork().transactional(async (tx) => {
    const { place, cohort } = await lockPlace(tx, id)
    if (!['asked', 'waiting-list', 'offered'].includes(place.state)) return
    const now = app.clock.schoolNow()
    const first = place.state === 'asked'
    // Nobody takes a turn in a cohort that has begun.
    if (first && schoolDay(now) >= cohort.startsOn) throw new Refusal('cohort_not_open')
    const slots = await settleOffers(tx, app, cohort)
    if (place.state === 'offered') return
    if (first) {
      place.openedAt = now
      notePlace(tx, place, 'visitor', 'place-opened', { cohort: cohort.code })
    }
    const slot = schoolDay(now) < cohort.startsOn ? slots[0] : undefined
    if (slot !== undefined) {
      if (!await offerPlace(tx, app, place, cohort, slot, holdMs.toBeginPaying, 'visitor')) throw new Refusal('offer_open')
    }
    else if (first) {
      place.state = 'waiting-list'
      notePlace(tx, place, 'visitor', 'place-listed', { cohort: cohort.code, number: place.listNumber })
    }
  })
}
