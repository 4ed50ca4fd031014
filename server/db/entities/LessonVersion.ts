import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { Lesson } from './Lesson'

/** What a lesson said from a moment on; never changed after publishing. */
export const LessonVersion = defineEntity({
  name: 'LessonVersion',
  properties: {
    id: id(),
    lesson: () => p.manyToOne(Lesson).ref(),
    version: p.integer(),
    /** Markdown of the starter curriculum. */
    markdown: p.text(),
    publishedAt: instant(),
  },
  uniques: [{ properties: ['lesson', 'version'] }],
})
export type LessonVersion = InferEntity<typeof LessonVersion>
