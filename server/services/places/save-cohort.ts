import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace, takingStates } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { CohortChange, CohortInput, CohortRow } from '#shared/contract/places'
import { countPlaces } from './count-places'
import { toCohortRow } from './list-cohorts'
import { lockCohort } from './lock-place'
import { settleOffers } from './settle-offers'

function check({ startsOn, endsOn, priceMinor, depositMinor }: Pick<Cohort, 'startsOn' | 'endsOn' | 'priceMinor' | 'depositMinor'>): void {
  if (endsOn < startsOn) throw new Refusal('cohort_dates')
  if (depositMinor > priceMinor) throw new Refusal('cohort_deposit')
}

/**
 * Opens a cohort of the school's course.
 *
 * @throws {Refusal} cohort_known, cohort_dates, cohort_deposit
 */
export async function makeCohort(em: EntityManager, actor: Actor, input: CohortInput): Promise<CohortRow> {
  check(input)
  try {
    return await em.transactional(async (tx) => {
      const [course] = await tx.find(Course, {}, { orderBy: { createdAt: 'asc' }, limit: 1 })
      const cohort = tx.create(Cohort, { ...input, course: course ?? null, currency: 'GBP', lastListNumber: 0, createdAt: new Date() })
      tx.persist(cohort)
      recordEvent(tx, { actor: actor.id, action: 'cohort-made', subject: `cohort:${cohort.id}`, detail: { ...input, name: undefined, pattern: undefined } })
      await tx.flush()
      return toCohortRow(cohort)
    })
  }
  catch (thrown) {
    if (thrown instanceof UniqueConstraintViolationException) throw new Refusal('cohort_known')
    throw thrown
  }
}

/**
 * Changes a cohort. Benches that come with it go to the waiting list first.
 *
 * @throws {Refusal} cohort_not_found, cohort_dates, cohort_deposit, cohort_benches_taken
 */
export async function changeCohort(em: EntityManager, app: App, actor: Actor, code: string, change: CohortChange): Promise<CohortRow> {
  return em.transactional(async (tx) => {
    const cohort = await lockCohort(tx, { code })
    const grows = change.places !== undefined && change.places > cohort.places
    if (change.places !== undefined && change.places < cohort.places) {
      const above = await tx.count(BenchPlace, { cohort: cohort.id, state: { $in: [...takingStates] }, slot: { $gt: change.places } })
      const taken = (await countPlaces(tx, [cohort.id])).get(cohort.id)?.taken ?? 0
      if (taken > change.places) throw new Refusal('cohort_benches_taken')
      if (above > 0) await moveDown(tx, cohort, change.places)
    }
    Object.assign(cohort, change)
    check(cohort)
    recordEvent(tx, { actor: actor.id, action: 'cohort-changed', subject: `cohort:${cohort.id}`, detail: { ...change, name: undefined, pattern: undefined } })
    await tx.flush()
    await settleOffers(tx, app, cohort, { freed: grows })
    await tx.flush()
    return toCohortRow(cohort, (await countPlaces(tx, [cohort.id])).get(cohort.id))
  })
}

/** Gives those on benches that go a lower number that is free: there are enough, or this is not called. */
async function moveDown(tx: EntityManager, cohort: Cohort, places: number): Promise<void> {
  const all = await tx.find(BenchPlace, { cohort: cohort.id, state: { $in: [...takingStates] } })
  const free = Array.from({ length: places }, (_, index) => index + 1).filter(slot => !all.some(place => place.slot === slot))
  for (const place of all.filter(one => (one.slot ?? 0) > places)) {
    place.slot = free.shift() ?? null
    await tx.flush()
  }
}
