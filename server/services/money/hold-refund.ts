import type { EntityManager } from '@mikro-orm/postgresql'
import { Refund } from '#server/db/entities/Refund'
import { lockPlace } from '#server/services/places/lock-place'
import { Refusal } from '#server/utils/refusal'

/** A refund with its place held, as it stands now. @throws {Refusal} refund_not_found, also when it is another place's */
export async function holdRefund(tx: EntityManager, refundId: string, placeId?: string): Promise<Refund> {
  const known = await tx.findOne(Refund, { id: refundId, ...(placeId ? { place: placeId } : {}) })
  if (!known) throw new Refusal('refund_not_found')
  await lockPlace(tx, known.place.id)
  return tx.findOneOrFail(Refund, { id: refundId }, { refresh: true })
}
