import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Refusal } from '#server/utils/refusal'

/** A place with its cohort, course and person. */
export type FoundPlace = Loaded<BenchPlace, 'cohort' | 'cohort.course' | 'person'>

/** Any place of the school. The office sees all. @throws {Refusal} place_not_found */
export async function findPlace(em: EntityManager, id: string): Promise<FoundPlace> {
  const place = await em.findOne(BenchPlace, { id }, { populate: ['cohort', 'cohort.course', 'person'] })
  if (!place) throw new Refusal('place_not_found')
  return place
}
