import type { EntityManager } from '@mikro-orm/postgresql'
import { Cohort } from '#server/db/entities/Cohort'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { CohortRow } from '#shared/contract/places'
import { visibleCohorts } from './cohort-rights'
import { countPlaces, type PlaceCount } from './count-places'

export function toCohortRow(cohort: Cohort, { taken, waiting }: PlaceCount = { taken: 0, waiting: 0 }): CohortRow {
  const { code, name, startsOn, endsOn, pattern, places, open, priceMinor, depositMinor, currency } = cohort
  return { code, name, startsOn, endsOn, pattern, places, taken, waiting, open, price: { minor: priceMinor, currency }, deposit: { minor: depositMinor, currency } }
}

/** Cohorts a person may see, latest start first. A school has a handful a year. */
export async function listCohorts(em: EntityManager, app: App, actor: Actor): Promise<CohortRow[]> {
  const cohorts = await em.find(Cohort, await visibleCohorts(em, app, actor), { orderBy: { startsOn: 'desc', code: 'asc' } })
  const counts = await countPlaces(em, cohorts.map(one => one.id))
  return cohorts.map(one => toCohortRow(one, counts.get(one.id)))
}
