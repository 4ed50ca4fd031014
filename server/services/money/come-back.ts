import type { EntityManager } from '@mikro-orm/postgresql'
import { AdapterRefusal } from '#server/adapters/adapter-refusal'
import { Payment } from '#server/db/entities/Payment'
import { findLinkedPlace } from '#server/services/places/find-linked-place'
import type { App } from '#server/utils/app'
import type { ReturnedAnswer } from '#shared/contract/money'
import { applyPayment } from './apply-payment'

/**
 * Somebody came back from the processor's page: looks at once how the place's open payments stand. Only those of the place whose link
 * this is; what is open of another's is neither looked at nor told.
 *
 * @throws {Refusal} place_link_unknown
 */
export async function comeBack(em: EntityManager, app: App, token: string): Promise<ReturnedAnswer> {
  const place = await findLinkedPlace(em, app, token)
  const open = { place: place.id, state: { $in: ['begun', 'open'] as ('begun' | 'open')[] } }
  for (const { id } of await em.fork().find(Payment, open)) {
    try {
      await applyPayment(app, id)
    }
    catch (thrown) {
      // The message or the sweep will tell; until then it is under way.
      if (!(thrown instanceof AdapterRefusal)) throw thrown
    }
  }
  return { underWay: await em.fork().count(Payment, open) > 0 }
}
