import type { EntityManager } from '@mikro-orm/postgresql'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findLinkedPlace } from './find-linked-place'
import { lockPlace } from './lock-place'
import { backToList, settleOffers } from './settle-offers'

/**
 * Lets an offer go: the turn on the list stays, and the bench goes to whoever is next, in the same transaction.
 *
 * @throws {Refusal} place_link_unknown, place_state
 */
export async function passOffer(em: EntityManager, app: App, token: string): Promise<void> {
  const { id } = await findLinkedPlace(em, app, token)
  await em.fork().transactional(async (tx) => {
    const { place, cohort } = await lockPlace(tx, id)
    if (place.state !== 'offered') throw new Refusal('place_state')
    backToList(tx, place, 'visitor', 'place-offer-passed')
    await settleOffers(tx, app, cohort, { letGo: [place] })
  })
}
