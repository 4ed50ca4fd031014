import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { Lesson } from './Lesson'
import { LessonVersion } from './LessonVersion'
import { User } from './User'

/** How far a person is in a lesson, and the version they keep to while their head is under way. */
export const LessonProgress = defineEntity({
  name: 'LessonProgress',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    lesson: () => p.manyToOne(Lesson).ref(),
    /** Heading last read; null at the top. */
    anchor: p.string().length(120).nullable(),
    /** Set when the lesson changed while this person's head was under way: the version they began with. */
    kept: () => p.manyToOne(LessonVersion).ref().nullable(),
    finishedAt: instant().nullable(),
    updatedAt: instant(),
  },
  uniques: [{ properties: ['person', 'lesson'] }],
})
export type LessonProgress = InferEntity<typeof LessonProgress>
