import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { LessonDocument } from '../../../shared/contract/lesson-document'
import { id, instant, jsonOnce } from './column'
import { Lesson } from './Lesson'
import { User } from './User'

/** What a lesson said from a moment on; never changed after publishing. */
export const LessonVersion = defineEntity({
  name: 'LessonVersion',
  properties: {
    id: id(),
    lesson: () => p.manyToOne(Lesson).ref(),
    version: p.integer(),
    title: p.string().length(160),
    /** The published document, checked against the lesson schema. */
    document: jsonOnce<LessonDocument>(),
    /** Reading time. */
    minutes: p.integer(),
    whatChanged: p.text(),
    why: p.text(),
    /** Null for the starter curriculum. */
    publishedBy: () => p.manyToOne(User).ref().nullable(),
    publishedAt: instant(),
  },
  uniques: [{ properties: ['lesson', 'version'] }],
  // Which versions show a picture or film.
  indexes: [{ name: 'lesson_version_document', expression: 'create index "lesson_version_document" on "lesson_version" using gin ("document")' }],
})
export type LessonVersion = InferEntity<typeof LessonVersion>
