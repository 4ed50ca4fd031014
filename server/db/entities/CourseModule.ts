import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id } from './column'
import { Course } from './Course'

/** A part of a course: what one can do after it, and the points that stand at its end. */
export const CourseModule = defineEntity({
  name: 'CourseModule',
  properties: {
    id: id(),
    course: () => p.manyToOne(Course).ref(),
    number: p.integer(),
    title: p.string().length(160),
    /** "you know what you were given and how well you know it". */
    outcome: p.text(),
    /** Codes of the points at its end: `hold-1`. */
    gates: p.array(),
  },
  uniques: [{ properties: ['course', 'number'] }],
})
export type CourseModule = InferEntity<typeof CourseModule>
