import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonNote } from '#server/db/entities/LessonNote'
import type { Actor } from '#server/utils/actor'
import type { NoteView } from '#shared/contract/lessons'
import { noteView } from './note-view'

/** More than anybody writes in a course; an end all the same. */
const most = 1000

/** A person's own notes, newest first; of one lesson where its address is given. Also once access to the lessons has ended. */
export async function listNotes(em: EntityManager, actor: Actor, slug?: string): Promise<NoteView[]> {
  const notes = await em.find(LessonNote, { person: actor.id, ...(slug === undefined ? {} : { lesson: { slug } }) }, { populate: ['lesson'], orderBy: { updatedAt: 'desc', id: 'asc' }, limit: most })
  return notes.map(note => noteView(note, note.lesson.$))
}
