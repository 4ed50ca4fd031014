import type { EntityManager } from '@mikro-orm/postgresql'
import { decideRefund } from '#server/services/money/decide-refund'
import { quoteRefund } from '#server/services/money/quote-refund'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { CancelInput } from '#shared/contract/places'
import { lockPlace } from './lock-place'
import { notePlace } from './note-place'
import { liveStates, takesBench } from './place-states'
import { settleOffers } from './settle-offers'

/**
 * Ends a place. What goes back by the rule is decided, and the bench offered to the waiting list, in the same transaction. Stopped for unsafe work
 * it is `stopped`, else `cancelled`.
 *
 * @param input.seenMinor the sum that was shown; when it is another by now nothing happens
 * @throws {Refusal} place_not_found, place_state, refund_changed with the new `quote`
 */
export async function cancelPlace(em: EntityManager, app: App, actor: Pick<Actor, 'id'>, id: string, { cause, seenMinor, note }: CancelInput): Promise<void> {
  await em.transactional(async (tx) => {
    const { place, cohort } = await lockPlace(tx, id)
    if (!liveStates.includes(place.state)) throw new Refusal('place_state')
    const quote = await quoteRefund(tx, app, place, { cause })
    if (quote.back.minor !== seenMinor) throw new Refusal('refund_changed', undefined, { quote })
    await decideRefund(tx, app, actor, place, quote)
    const freed = takesBench(place.state)
    const stopped = cause === 'unsafe-work'
    notePlace(tx, place, actor, stopped ? 'place-stopped' : 'place-cancelled', { cause, rule: quote.rule, backMinor: quote.back.minor, from: place.state, slot: place.slot })
    Object.assign(place, { state: stopped ? 'stopped' : 'cancelled', slot: null, offeredAt: null, heldUntil: null, endedAt: app.clock.schoolNow(), endedBecause: cause, note: withNote(place.note, note) })
    await tx.flush()
    await settleOffers(tx, app, cohort, { freed })
  })
}

/** The note of a place with one more under it. */
export function withNote(before: string, more: string): string {
  return [before, more].filter(Boolean).join('\n')
}
