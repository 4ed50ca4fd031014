import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { readPlaceToken } from './place-link'

/** A place with its cohort and course. */
export type LinkedPlace = Loaded<BenchPlace, 'cohort' | 'cohort.course'>

/** The place whose link this is. @throws {Refusal} place_link_unknown for a link that is not ours, or was ended */
export async function findLinkedPlace(em: EntityManager, app: App, token: string): Promise<LinkedPlace> {
  const read = readPlaceToken(app, token)
  const place = read && await em.findOne(BenchPlace, { id: read.placeId, linkVersion: read.linkVersion }, { populate: ['cohort', 'cohort.course'] })
  if (!place) throw new Refusal('place_link_unknown')
  return place
}
