import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { Cohort } from './Cohort'
import { id, instant } from './column'
import { User } from './User'

export const placeStates = ['asked', 'offered', 'deposit-paid', 'confirmed', 'here', 'finished', 'waiting-list', 'moved', 'cancelled', 'stopped'] as const
export type PlaceState = (typeof placeStates)[number]

/** A person's place in a cohort. Alumni are students whose place is `finished`. */
export const BenchPlace = defineEntity({
  name: 'BenchPlace',
  properties: {
    id: id(),
    cohort: () => p.manyToOne(Cohort).ref(),
    person: () => p.manyToOne(User).ref(),
    state: p.enum([...placeStates]),
    /** Bench number, 1 to the cohort's places; null when the state takes none. */
    slot: p.integer().nullable(),
    createdAt: instant().onCreate(() => new Date()),
    finishedAt: instant().nullable(),
  },
  uniques: [{ properties: ['cohort', 'person'] }],
  // A bench takes one person; states that take none have no part in it.
  indexes: [{ name: 'bench_place_slot_taken', expression: `create unique index "bench_place_slot_taken" on "bench_place" ("cohort_id", "slot") where "state" in ('offered', 'deposit-paid', 'confirmed', 'here')` }],
})
export type BenchPlace = InferEntity<typeof BenchPlace>
