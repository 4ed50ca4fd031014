import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { Course } from './Course'

/** One start of the course: its dates, pattern, bench places and prices. */
export const Cohort = defineEntity({
  name: 'Cohort',
  properties: {
    id: id(),
    course: () => p.manyToOne(Course).ref().nullable(),
    code: p.string().length(20).unique(),
    name: p.string().length(80),
    startsOn: p.date(),
    endsOn: p.date(),
    pattern: p.text(),
    places: p.integer(),
    /** Whether strangers may ask for a place. */
    open: p.boolean().default(false),
    /** Minor units of `currency`: pence. The deposit counts toward the price. */
    priceMinor: p.integer().default(0),
    depositMinor: p.integer().default(0),
    currency: p.string().length(3).default('GBP'),
    /** Number given to the newest ask; asks are numbered 1, 2, 3 in the order they were kept. */
    lastListNumber: p.integer().default(0),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type Cohort = InferEntity<typeof Cohort>
