import type { EntityManager } from '@mikro-orm/postgresql'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import type { PointRelease } from '#server/db/entities/PointRelease'

/**
 * Conditions of each release (by its id) that still stand. The program's own ("no more cutting at ...") ends with the newest result
 * of the same criterion at the same unit being accept; what an instructor wrote stands as long as the release.
 *
 * Source: handbook 3.4, "shown on My bench until a newer reading accepts".
 */
export async function standingConditions(em: EntityManager, headId: string, releases: readonly PointRelease[]): Promise<Map<string, string[]>> {
  const live = releases.filter(one => !one.shutAgainAt)
  const criteria = [...new Set(live.flatMap(one => one.conditions.map(condition => condition.criterion)))]
  const newest = criteria.length === 0
    ? []
    : await em.find(CriterionResult, { criterion: { $in: criteria }, set: { submission: { head: headId } } }, { populate: ['set'], orderBy: { set: { scoredAt: 'desc' } } })
  return new Map(live.map((release) => {
    const own = release.conditions.filter((condition) => {
      // A submission may have several results of one unit; all of its newest set must accept.
      const later = newest.filter(one => one.criterion === condition.criterion && one.cylinder === condition.cylinder && one.side === condition.side && one.set.$.scoredAt > release.at)
      const last = later[0]?.set.id
      return later.length === 0 || later.some(one => one.set.id === last && one.state !== 'accept')
    }).map(condition => condition.text)
    return [release.id, [...own, ...(release.condition ? [release.condition] : [])]]
  }))
}
