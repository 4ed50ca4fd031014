import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { LessonNote } from '#server/db/entities/LessonNote'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'

/** A person's own note, locked. @throws {Refusal} note_not_found, also for somebody else's */
export async function ownNote(tx: EntityManager, actor: Actor, id: string): Promise<LessonNote> {
  const note = await tx.findOne(LessonNote, { id, person: actor.id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  if (!note) throw new Refusal('note_not_found')
  return note
}
