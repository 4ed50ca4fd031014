import type { EntityManager } from '@mikro-orm/postgresql'
import { takingStates } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'

/** Benches of a cohort that nobody has, smallest number first. The cohort is held by the caller, or the answer is old at once. */
export async function freeSlots(tx: EntityManager, cohort: Cohort): Promise<number[]> {
  await tx.flush()
  const rows = await tx.getConnection().execute<{ slot: number }[]>(
    `select slot from bench_place where cohort_id = ? and state in (${takingStates.map(() => '?').join(', ')})`, [cohort.id, ...takingStates], 'all', tx.getTransactionContext())
  const taken = new Set(rows.map(row => row.slot))
  return Array.from({ length: cohort.places }, (_, index) => index + 1).filter(slot => !taken.has(slot))
}
