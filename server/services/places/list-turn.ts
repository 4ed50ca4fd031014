import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'

/** Turn of a place on the waiting list, 1 is next; null when it is not on it. Counts who stands before it in `listOrder`. */
export async function turnOf(em: EntityManager, place: BenchPlace): Promise<number | null> {
  if (place.state !== 'waiting-list') return null
  // Places without a list number come after those with one, as PostgreSQL orders them.
  const [row] = await em.getConnection().execute<{ ahead: number }[]>(
    `select count(*)::int as ahead from bench_place o, bench_place mine
      where mine.id = ? and o.cohort_id = mine.cohort_id and o.state = 'waiting-list'
        and (o.offers_let_go, coalesce(o.list_number, 2147483647), o.created_at, o.id) < (mine.offers_let_go, coalesce(mine.list_number, 2147483647), mine.created_at, mine.id)`,
    [place.id], 'all', em.getTransactionContext())
  return (row?.ahead ?? 0) + 1
}
