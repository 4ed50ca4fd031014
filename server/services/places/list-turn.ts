import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { listOrder } from './settle-offers'

/** Ids of those who wait in a cohort, in the order in which they are asked. */
export async function waitingInOrder(em: EntityManager, cohortId: string): Promise<string[]> {
  return (await em.find(BenchPlace, { cohort: cohortId, state: 'waiting-list' }, { orderBy: listOrder, fields: ['id'] })).map(place => place.id)
}

/** Turn of a place on the waiting list, 1 is next; null when it is not on it. */
export async function turnOf(em: EntityManager, place: BenchPlace): Promise<number | null> {
  if (place.state !== 'waiting-list') return null
  return (await waitingInOrder(em, place.cohort.id)).indexOf(place.id) + 1
}
