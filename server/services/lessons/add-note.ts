import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonNote } from '#server/db/entities/LessonNote'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { NoteInput, NoteView } from '#shared/contract/lessons'
import { findReadableLesson } from './find-lesson'
import { noteView } from './note-view'

/** A person's own note at a heading, or at the top, of a lesson. @throws {Refusal} lesson_not_found, or as readableLessons */
export async function addNote(em: EntityManager, app: App, actor: Actor, slug: string, { anchor, text }: NoteInput): Promise<NoteView> {
  return em.transactional(async (tx) => {
    const lesson = await findReadableLesson(tx, app, actor, slug)
    const now = app.clock.schoolNow()
    const note = tx.create(LessonNote, { person: tx.getReference(User, actor.id), lesson, anchor, text, createdAt: now, updatedAt: now })
    tx.persist(note)
    await tx.flush()
    return noteView(note, lesson)
  })
}
