import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { Rubric } from '../../../shared/domain/rubric/criterion'
import { id, instant, jsonOnce } from './column'
import { User } from './User'

/** The whole rubric as it stood: stages, points, criteria, bands and texts. Never changed; a change is the next version. */
export const RubricVersion = defineEntity({
  name: 'RubricVersion',
  properties: {
    id: id(),
    version: p.integer().unique(),
    // Never changed, so not compared at every flush: it is the largest thing a request loads.
    rubric: jsonOnce<Rubric>(),
    note: p.text().default(''),
    savedBy: () => p.manyToOne(User).ref().nullable(),
    savedAt: instant(),
  },
})
export type RubricVersion = InferEntity<typeof RubricVersion>
