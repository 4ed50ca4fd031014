import type { EntityManager } from '@mikro-orm/postgresql'
import { Cohort } from '#server/db/entities/Cohort'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { hasRole, type Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'

/** Which cohorts a person may look at: the office all, an instructor those taught now. A condition for a query. */
export async function visibleCohorts(em: EntityManager, actor: Actor, schoolNow: Date): Promise<{ id?: { $in: string[] } }> {
  if (hasRole(actor, 'admin')) return {}
  const links = await em.find(CohortStaff, { person: actor.id, from: { $lte: schoolNow }, $or: [{ until: null }, { until: { $gt: schoolNow } }] })
  return { id: { $in: [...new Set(links.map(link => link.cohort.id))] } }
}

/** @throws {Refusal} cohort_not_found, also for a cohort this person does not teach */
export async function findVisibleCohort(em: EntityManager, actor: Actor, code: string, schoolNow: Date): Promise<Cohort> {
  const cohort = await em.findOne(Cohort, { $and: [{ code }, await visibleCohorts(em, actor, schoolNow)] }, { populate: ['course'] })
  if (!cohort) throw new Refusal('cohort_not_found')
  return cohort
}
