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
})
export type BenchPlace = InferEntity<typeof BenchPlace>
