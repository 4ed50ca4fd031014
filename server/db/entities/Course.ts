import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

/** What the school teaches; its modules hold the lessons, its cohorts the people. */
export const Course = defineEntity({
  name: 'Course',
  properties: {
    id: id(),
    code: p.string().length(40).unique(),
    title: p.string().length(160),
    /** One paragraph for somebody who has never cut a head. */
    summary: p.text(),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type Course = InferEntity<typeof Course>
