import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { Cohort } from './Cohort'
import { id, instant } from './column'
import { User } from './User'

/** That an instructor teaches a cohort, and which points they may sign there, from and to a date. */
export const CohortStaff = defineEntity({
  name: 'CohortStaff',
  properties: {
    id: id(),
    cohort: () => p.manyToOne(Cohort).ref(),
    person: () => p.manyToOne(User).ref(),
    /** Point codes: `hold-4`, `witness-1`, ... */
    points: p.array(),
    /** Posts held, as the rubric names signers: `lead`, `chamber`, `air`, `second`. */
    posts: p.array(),
    from: instant(),
    until: instant().nullable(),
    /** Null only for the link the demo school starts with. */
    givenBy: () => p.manyToOne(User).ref().nullable(),
  },
  indexes: [{ properties: ['person', 'cohort'] }],
})
export type CohortStaff = InferEntity<typeof CohortStaff>
