import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { NoteInput, NoteView } from '#shared/contract/lessons'
import { noteView } from './note-view'
import { ownNote } from './own-note'

/** Own notes stay own, also after access to the lessons has ended. @throws {Refusal} note_not_found, also for somebody else's */
export async function changeNote(em: EntityManager, app: App, actor: Actor, id: string, { anchor, text }: NoteInput): Promise<NoteView> {
  return em.transactional(async (tx) => {
    const note = await ownNote(tx, actor, id)
    Object.assign(note, { anchor, text, updatedAt: app.clock.schoolNow() })
    await tx.flush()
    return noteView(note, await tx.findOneOrFail(Lesson, { id: note.lesson.id }))
  })
}
