import type { EntityManager } from '@mikro-orm/postgresql'
import { takingStates } from '#server/db/entities/BenchPlace'

export interface PlaceCount { taken: number, waiting: number }

/** How many benches of each cohort are taken, and how many people wait. A cohort nobody asked for is left out. */
export async function countPlaces(em: EntityManager, cohortIds: readonly string[]): Promise<Map<string, PlaceCount>> {
  if (cohortIds.length === 0) return new Map()
  const marks = (list: readonly unknown[]) => list.map(() => '?').join(', ')
  const rows = await em.getConnection().execute<{ cohort_id: string, taken: number, waiting: number }[]>(
    `select cohort_id, count(*) filter (where state in (${marks(takingStates)}))::int as taken, count(*) filter (where state = 'waiting-list')::int as waiting
       from bench_place where cohort_id in (${marks(cohortIds)}) group by cohort_id`, [...takingStates, ...cohortIds], 'all', em.getTransactionContext())
  return new Map(rows.map(row => [row.cohort_id, { taken: row.taken, waiting: row.waiting }]))
}
