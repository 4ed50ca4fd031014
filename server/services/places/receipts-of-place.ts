import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Receipt } from '#server/db/entities/Receipt'

/** Receipts of a place and of the one it was moved from, newest first. */
export async function receiptsOfPlace(em: EntityManager, place: BenchPlace): Promise<Loaded<Receipt, 'line'>[]> {
  const ids = [place.id]
  for (let from = place.movedFromId; from; from = (await em.findOne(BenchPlace, { id: from }))?.movedFromId) ids.push(from)
  return em.find(Receipt, { line: { place: { $in: ids } } }, { populate: ['line'], orderBy: { number: 'desc' } })
}
