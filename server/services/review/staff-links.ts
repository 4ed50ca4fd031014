import type { EntityManager } from '@mikro-orm/postgresql'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import type { Actor } from '#server/utils/actor'

/** Cohorts a person teaches at a moment of the school's time, with the points they may sign in each. */
export async function staffLinks(em: EntityManager, actor: Actor, schoolNow: Date): Promise<Map<string, Set<string>>> {
  if (!actor.roles.includes('instructor')) return new Map()
  const links = await em.find(CohortStaff, { person: actor.id, from: { $lte: schoolNow }, $or: [{ until: null }, { until: { $gt: schoolNow } }] })
  const cohorts = new Map<string, Set<string>>()
  for (const link of links) {
    const points = cohorts.get(link.cohort.id) ?? new Set<string>()
    for (const point of link.points) points.add(point)
    cohorts.set(link.cohort.id, points)
  }
  return cohorts
}
