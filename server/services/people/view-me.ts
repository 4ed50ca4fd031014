import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Actor } from '#server/utils/actor'
import type { MeView } from '#shared/contract/views'

/** The signed-in person with their bench places, newest first. */
export async function viewMe(em: EntityManager, actor: Actor): Promise<MeView> {
  const places = await em.find(BenchPlace, { person: actor.id }, { populate: ['cohort'], orderBy: { cohort: { startsOn: 'desc' } } })
  return {
    id: actor.id,
    name: actor.name,
    email: actor.email,
    roles: actor.roles,
    unit: actor.unit,
    places: places.map(one => ({ cohort: one.cohort.$.name, code: one.cohort.$.code, state: one.state, slot: one.slot ?? null, finishedAt: one.finishedAt?.toISOString() ?? null })),
  }
}
