import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { CastingCard } from '../../../shared/domain/geometry/casting'
import { id, instant, jsonOnce } from './column'

/** A casting's nominal table, versioned: a change is a new row. */
export const Casting = defineEntity({
  name: 'Casting',
  properties: {
    id: id(),
    code: p.string().length(20),
    name: p.string().length(80),
    version: p.integer(),
    // Never changed, so not compared at every flush: it is the largest thing a request loads.
    card: jsonOnce<CastingCard>(),
    createdAt: instant().onCreate(() => new Date()),
  },
  uniques: [{ properties: ['code', 'version'] }],
})
export type Casting = InferEntity<typeof Casting>
