import type { EntityManager } from '@mikro-orm/postgresql'
import { Casting } from '#server/db/entities/Casting'
import type { CastingView } from '#shared/contract/views'

/** The newest card of each casting, by name. */
export async function listCastings(em: EntityManager): Promise<CastingView[]> {
  const all = await em.find(Casting, {}, { orderBy: { name: 'asc', version: 'desc' } })
  const newest = all.filter((one, index) => all.findIndex(other => other.code === one.code) === index)
  return newest.map(({ code, name, version, card }) => ({ code, name, version, card }))
}
