import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'
import type { App } from '#server/utils/app'
import { notePlace, type PlaceActor } from './note-place'
import { nothingPaid, placeMoney } from './place-money'

/** A place whose deposit is paid is confirmed once the whole price is. Place and cohort are locked by the caller. */
export async function confirmWhenPaid(tx: EntityManager, app: App, place: BenchPlace, cohort: Cohort, actor: PlaceActor): Promise<void> {
  if (place.state !== 'deposit-paid') return
  await tx.flush()
  const { paidMinor } = (await placeMoney(tx, [place.id])).get(place.id) ?? nothingPaid
  if (paidMinor < cohort.priceMinor) return
  place.state = 'confirmed'
  place.confirmedAt = app.clock.schoolNow()
  notePlace(tx, place, actor, 'place-confirmed', { minor: paidMinor })
}
