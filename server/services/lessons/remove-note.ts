import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import { ownNote } from './own-note'

/** Takes a note away for good. @throws {Refusal} note_not_found, also for somebody else's */
export async function removeNote(em: EntityManager, actor: Actor, id: string): Promise<void> {
  await em.transactional(async (tx) => {
    tx.remove(await ownNote(tx, actor, id))
  })
}
