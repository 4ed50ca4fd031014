import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import type { PracticeHead } from '#server/db/entities/PracticeHead'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'

/**
 * What somebody wants with a head or its proof. `see`: look at it. `add`: bring evidence in, as its student or on the student's
 * behalf. `own`: the student alone. `teach`: an instructor of its cohort.
 */
export type HeadPurpose = 'see' | 'add' | 'own' | 'teach'

/** Ids of the cohorts a person teaches now, by the school's clock. */
export async function cohortsTaught(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor): Promise<string[]> {
  if (!hasRole(actor, 'instructor')) return []
  const at = app.clock.schoolNow()
  const links = await em.find(CohortStaff, { person: actor.id, from: { $lte: at }, $or: [{ until: null }, { until: { $gt: at } }] })
  return [...new Set(links.map(link => link.cohort.id))]
}

/** The condition that finds only heads a person may have for that purpose: ownership is part of the query, so another's head is "not found". */
export async function visibleHeads(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, purpose: HeadPurpose = 'see'): Promise<FilterQuery<PracticeHead>> {
  if (purpose === 'see' && hasRole(actor, 'admin', 'safety')) return {}
  const ways: FilterQuery<PracticeHead>[] = []
  if (purpose !== 'teach' && hasRole(actor, 'student')) ways.push({ student: actor.id })
  if (purpose !== 'own') {
    const taught = await cohortsTaught(em, app, actor)
    if (taught.length > 0) ways.push({ cohort: { $in: taught } })
  }
  return ways.length > 0 ? { $or: ways } : { id: { $in: [] } }
}
