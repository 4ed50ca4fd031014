import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { OwnPlaceView } from '#shared/contract/places'
import { placeLink } from './place-link'
import { toLinkView } from './view-linked-place'

/** A person's own places with their money and receipts, latest cohort first. */
export async function listOwnPlaces(em: EntityManager, app: App, actor: Actor): Promise<OwnPlaceView[]> {
  const places = await em.find(BenchPlace, { person: actor.id }, { populate: ['cohort', 'cohort.course'], orderBy: { cohort: { startsOn: 'desc' }, createdAt: 'desc' } })
  const views: OwnPlaceView[] = []
  for (const place of places) views.push({ ...await toLinkView(em, app, place), link: placeLink(app, place) })
  return views
}
