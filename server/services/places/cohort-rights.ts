import type { EntityManager } from '@mikro-orm/postgresql'
import { Cohort } from '#server/db/entities/Cohort'
import { cohortsTaught } from '#server/services/heads/visible-heads'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/** Which cohorts a person may look at: the office all, an instructor those taught now. A condition for a query. */
export async function visibleCohorts(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor): Promise<{ id?: { $in: string[] } }> {
  return hasRole(actor, 'admin') ? {} : { id: { $in: await cohortsTaught(em, app, actor) } }
}

/** @throws {Refusal} cohort_not_found, also for a cohort this person does not teach */
export async function findVisibleCohort(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, code: string): Promise<Cohort> {
  const cohort = await em.findOne(Cohort, { $and: [{ code }, await visibleCohorts(em, app, actor)] }, { populate: ['course'] })
  if (!cohort) throw new Refusal('cohort_not_found')
  return cohort
}
