import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Refusal } from '#server/utils/refusal'

export interface LockedPlace { place: BenchPlace, cohort: Cohort }

/**
 * Holds a cohort, so that nobody else gives or takes a place of it until this transaction ends.
 * Whoever decides on places comes through here first, and two never wait for each other.
 *
 * @throws {Refusal} cohort_not_found
 */
export async function lockCohort(tx: EntityManager, where: { id: string } | { code: string }): Promise<Cohort> {
  const cohort = await tx.findOne(Cohort, where, { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true })
  if (!cohort) throw new Refusal('cohort_not_found')
  return cohort
}

/**
 * Holds a place and its cohort: the cohort always first, so that no two transactions lock in opposite order. A place never changes its cohort.
 *
 * @throws {Refusal} place_not_found
 */
export async function lockPlace(tx: EntityManager, placeId: string): Promise<LockedPlace> {
  const known = await tx.findOne(BenchPlace, { id: placeId })
  if (!known) throw new Refusal('place_not_found')
  const cohort = await lockCohort(tx, { id: known.cohort.id })
  const place = await tx.findOneOrFail(BenchPlace, { id: placeId }, { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true })
  return { place, cohort }
}
