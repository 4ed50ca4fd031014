import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

/** One start of the course: its dates, pattern and number of bench places. */
export const Cohort = defineEntity({
  name: 'Cohort',
  properties: {
    id: id(),
    code: p.string().length(20).unique(),
    name: p.string().length(80),
    startsOn: p.date(),
    endsOn: p.date(),
    pattern: p.text(),
    places: p.integer(),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type Cohort = InferEntity<typeof Cohort>
