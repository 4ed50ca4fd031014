import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import type { LedgerLine } from '#server/db/entities/LedgerLine'
import type { App } from '#server/utils/app'
import { confirmWhenPaid } from './confirm-when-paid'
import { lockPlace } from './lock-place'
import { takesBench } from './place-states'

/**
 * Something of the balance of a place is in the ledger: it is confirmed once all of the price is there. May be called twice for one line.
 *
 * @returns 'no-place' when the place was cancelled, moved or stopped meanwhile and the money should go back
 */
export async function balancePaid(tx: EntityManager, app: App, { id }: BenchPlace, _line: LedgerLine): Promise<'booked' | 'no-place'> {
  const { place, cohort } = await lockPlace(tx, id)
  await confirmWhenPaid(tx, app, place, cohort, 'job')
  return takesBench(place.state) || place.state === 'finished' ? 'booked' : 'no-place'
}
