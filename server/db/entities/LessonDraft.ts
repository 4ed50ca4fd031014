import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { LessonDocument } from '../../../shared/contract/lesson-document'
import { id, instant } from './column'
import { Lesson } from './Lesson'
import { User } from './User'

/** A lesson as it is being written; one a lesson. `revision` grows with every save, so that a save over somebody else's is seen. */
export const LessonDraft = defineEntity({
  name: 'LessonDraft',
  properties: {
    id: id(),
    lesson: () => p.manyToOne(Lesson).ref().unique(),
    revision: p.integer(),
    title: p.string().length(160),
    document: p.json<LessonDocument>(),
    savedBy: () => p.manyToOne(User).ref(),
    savedAt: instant(),
  },
})
export type LessonDraft = InferEntity<typeof LessonDraft>
