import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import { recordEvent } from '#server/utils/record-event'

/** What happens to a place, as the audit record names it. */
export const placeActions = [
  'place-asked', 'place-opened', 'place-listed', 'place-offered', 'place-pay-begun', 'place-offer-lapsed', 'place-offer-passed', 'place-offer-withdrawn', 'place-deposit-paid', 'place-retaken', 'place-confirmed',
  'place-order-taken', 'place-here', 'place-finished', 'place-cancelled', 'place-stopped', 'place-moved-away', 'place-moved-here', 'place-from-roster', 'place-bank-payment', 'place-overdue',
] as const
export type PlaceAction = (typeof placeActions)[number]

/** Who did it where no account did: the visitor with the mailed link, or the school's own clockwork. */
export type PlaceActor = { id: string } | 'visitor' | 'job'

/** Writes into the audit record what happened to a place: ids, codes and sums, never a name or an address. */
export function notePlace(tx: EntityManager, place: Pick<BenchPlace, 'id'>, actor: PlaceActor, action: PlaceAction, detail: Record<string, unknown> = {}, at?: Date): void {
  recordEvent(tx, { actor: typeof actor === 'string' ? actor : actor.id, action, subject: `place:${place.id}`, detail, at })
}
