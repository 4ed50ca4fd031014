import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { CourseModule } from './CourseModule'

/** A lesson of the course. What it says is in its versions. */
export const Lesson = defineEntity({
  name: 'Lesson',
  properties: {
    id: id(),
    number: p.integer().unique(),
    slug: p.string().length(80).unique(),
    title: p.string().length(160),
    module: () => p.manyToOne(CourseModule).ref(),
    /** Ops of the stages that need it. */
    ops: p.array(Number).columnType('integer[]'),
    /** Grows with every save of a draft and every publishing, so that a save over somebody else's is seen, also across a publishing. */
    revision: p.integer().default(0),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type Lesson = InferEntity<typeof Lesson>
