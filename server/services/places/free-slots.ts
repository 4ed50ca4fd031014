import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace, takingStates } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'

/** Benches of a cohort that nobody has, smallest number first. The cohort is held by the caller, or the answer is old at once. */
export async function freeSlots(tx: EntityManager, cohort: Cohort): Promise<number[]> {
  await tx.flush()
  const taken = new Set((await tx.find(BenchPlace, { cohort: cohort.id, state: { $in: [...takingStates] } })).map(place => place.slot))
  return Array.from({ length: cohort.places }, (_, index) => index + 1).filter(slot => !taken.has(slot))
}
