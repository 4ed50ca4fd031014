import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { User } from './User'

/** That a person may use a tool or process, from a date to a date, by whose word. */
export const Clearance = defineEntity({
  name: 'Clearance',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    /** Code as the rubric names it: `die-grinder`, `flow-bench`, ... */
    tool: p.string().length(40),
    from: instant(),
    until: instant(),
    givenBy: () => p.manyToOne(User).ref(),
    withdrawnAt: instant().nullable(),
  },
  indexes: [{ properties: ['person', 'tool'] }],
})
export type Clearance = InferEntity<typeof Clearance>
