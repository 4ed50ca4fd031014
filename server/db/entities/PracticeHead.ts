import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { Casting } from './Casting'
import { Cohort } from './Cohort'
import { id, instant } from './column'
import { RubricVersion } from './RubricVersion'
import { User } from './User'

export const headStates = ['received', 'working', 'finished', 'scrapped', 'sawn'] as const

/** One casting in a student's hands. A personal head (of alumni) has no cohort. Held and stopped are derived, never stored. */
export const PracticeHead = defineEntity({
  name: 'PracticeHead',
  properties: {
    id: id(),
    number: p.string().length(20).unique(),
    student: () => p.manyToOne(User).ref(),
    cohort: () => p.manyToOne(Cohort).ref().nullable(),
    casting: () => p.manyToOne(Casting).ref(),
    rubric: () => p.manyToOne(RubricVersion).ref(),
    state: p.enum([...headStates]).default('received'),
    /** Whether the core came from acid cleaning; null until somebody says. */
    acidCleaned: p.boolean().nullable(),
    /** Cylinder worked first: the one the baseline and first articles are of. */
    firstCylinder: p.integer().default(1),
    receivedAt: instant(),
  },
  indexes: [{ properties: ['student'] }, { properties: ['cohort'] }],
})
export type PracticeHead = InferEntity<typeof PracticeHead>
