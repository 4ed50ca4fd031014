import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Actor } from '#server/utils/actor'

/** States of a student's bench places, each once: the menu tells alumni by them. Nobody else is asked for theirs. */
export async function placeStatesOf(em: EntityManager, actor: Pick<Actor, 'id' | 'roles'>): Promise<string[]> {
  if (!actor.roles.includes('student')) return []
  const places = await em.find(BenchPlace, { person: actor.id }, { fields: ['state'] })
  return [...new Set(places.map(place => place.state))]
}
