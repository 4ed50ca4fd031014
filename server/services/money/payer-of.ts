import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'

/** Whom letters about a place's money go to: its account, or who asked while there is none. */
export interface Payer { id: string | null, name: string, email: string }

/** Null for a place that has neither, as one written down before there were addresses. */
export async function payerOf(em: EntityManager, placeId: string): Promise<Payer | null> {
  const place = await em.findOneOrFail(BenchPlace, { id: placeId }, { populate: ['person'] })
  const person = place.person?.$
  if (person) return { id: person.id, name: person.name, email: person.email }
  return place.email === '' ? null : { id: null, name: place.name, email: place.email }
}
