import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import type { LedgerLine } from '#server/db/entities/LedgerLine'
import type { App } from '#server/utils/app'
import { confirmWhenPaid } from './confirm-when-paid'
import { lockPlace } from './lock-place'
import { makeAccount } from './make-account'
import { notePlace } from './note-place'
import { settleOffers } from './settle-offers'
import { takesBench } from './place-states'

/**
 * The deposit of a place is in the ledger: the place is booked and gets its account.
 *
 * A hold that ran out meanwhile is taken up again while a bench is free that nobody on the list was offered. Where none is,
 * or the place was cancelled or moved, the answer is 'no-place' and the caller gives the money back. May be called twice for one line.
 */
export async function depositPaid(tx: EntityManager, app: App, { id }: BenchPlace, line: LedgerLine): Promise<'booked' | 'no-place'> {
  const { place, cohort } = await lockPlace(tx, id)
  if (['asked', 'waiting-list', 'offered'].includes(place.state)) {
    if (place.state !== 'offered') {
      // What was free when the hold ran out may have gone to the list since; what nobody waits for may still be taken.
      const [slot] = await settleOffers(tx, app, cohort)
      if (!takesBench(place.state)) {
        if (slot === undefined) return 'no-place'
        place.slot = slot
      }
      notePlace(tx, place, 'job', 'place-retaken', { cohort: cohort.code, slot: place.slot })
    }
    const now = app.clock.schoolNow()
    Object.assign(place, { state: 'deposit-paid', offeredAt: null, heldUntil: null, openedAt: place.openedAt ?? now, depositPaidAt: now })
    notePlace(tx, place, 'job', 'place-deposit-paid', { line: line.id, minor: line.amountMinor, slot: place.slot })
    await makeAccount(tx, app, place, 'job')
    await confirmWhenPaid(tx, app, place, cohort, 'job')
    return 'booked'
  }
  return takesBench(place.state) || place.state === 'finished' ? 'booked' : 'no-place'
}
