import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { notePlace, type PlaceActor } from './note-place'

const minute = 60_000

/** How long a place is held: to begin paying after the link was opened, and for an offer, from the offer (handbook 5.4). */
export const holdMs = { toBeginPaying: 30 * minute, offer: 48 * 60 * minute }

/**
 * Holds a bench for a place: the cohort is locked, the slot is free.
 *
 * One address has one open offer, whichever cohort: the index says so. Two transactions that would make two of them at once are kept
 * apart by a lock on the address that is never waited for, so that no two of them can wait for each other.
 *
 * @returns false, and nothing is done, when another place is held for the address or just being so
 */
export async function offerPlace(tx: EntityManager, app: App, place: BenchPlace, cohort: Cohort, slot: number, lastsMs: number, actor: PlaceActor): Promise<boolean> {
  if (place.email !== '' && !await mayHold(tx, place)) return false
  const now = app.clock.schoolNow()
  Object.assign(place, { state: 'offered', slot, offeredAt: now, heldUntil: new Date(now.getTime() + lastsMs) })
  notePlace(tx, place, actor, 'place-offered', { cohort: cohort.code, slot, minutes: lastsMs / minute })
  await tx.flush()
  // The minute's own turn would find it too; this finds it when it runs out.
  await enqueue(app, tx, 'pass-offers', { cohortId: cohort.id }, { startAfter: Math.ceil(lastsMs / 1000) + 1 })
  return true
}

async function mayHold(tx: EntityManager, place: BenchPlace): Promise<boolean> {
  const [row] = await tx.getConnection().execute<{ held: boolean }[]>('select pg_try_advisory_xact_lock(hashtextextended(?, 0)) as held', [`offer:${place.email.toLowerCase()}`], 'all', tx.getTransactionContext())
  if (!row?.held) return false
  await tx.flush()
  return await tx.count(BenchPlace, { email: place.email, state: 'offered', id: { $ne: place.id } }) === 0
}
