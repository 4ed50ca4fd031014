import type { Lesson } from '#server/db/entities/Lesson'
import type { LessonNote } from '#server/db/entities/LessonNote'
import type { NoteView } from '#shared/contract/lessons'

/** A note as the wire has it. */
export function noteView({ id, anchor, text, updatedAt }: Pick<LessonNote, 'id' | 'anchor' | 'text' | 'updatedAt'>, { slug, number, title }: Pick<Lesson, 'slug' | 'number' | 'title'>): NoteView {
  return { id, lesson: { slug, number, title }, anchor: anchor ?? null, text, updatedAt: updatedAt.toISOString() }
}
