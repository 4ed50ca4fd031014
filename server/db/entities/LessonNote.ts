import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { Lesson } from './Lesson'
import { User } from './User'

/** A person's own note at a heading of a lesson; nobody else sees it. */
export const LessonNote = defineEntity({
  name: 'LessonNote',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    lesson: () => p.manyToOne(Lesson).ref(),
    anchor: p.string().length(120).nullable(),
    text: p.text(),
    createdAt: instant(),
    updatedAt: instant(),
  },
  indexes: [{ properties: ['person', 'lesson'] }],
})
export type LessonNote = InferEntity<typeof LessonNote>
