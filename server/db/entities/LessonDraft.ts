import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { LessonDocument } from '../../../shared/contract/lesson-document'
import { id, instant } from './column'
import { Lesson } from './Lesson'
import { User } from './User'

/** A lesson as it is being written; one a lesson, at the lesson's `revision`. */
export const LessonDraft = defineEntity({
  name: 'LessonDraft',
  properties: {
    id: id(),
    lesson: () => p.manyToOne(Lesson).ref().unique(),
    title: p.string().length(160),
    document: p.json<LessonDocument>(),
    savedBy: () => p.manyToOne(User).ref(),
    savedAt: instant(),
  },
})
export type LessonDraft = InferEntity<typeof LessonDraft>
