import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { Cohort } from './Cohort'
import { id, instant } from './column'
import { User } from './User'

export const placeStates = ['asked', 'offered', 'deposit-paid', 'confirmed', 'here', 'finished', 'waiting-list', 'moved', 'cancelled', 'stopped'] as const
export type PlaceState = (typeof placeStates)[number]

/** States that take a bench: only these count against the cohort's number (handbook 5.4). */
export const takingStates: readonly PlaceState[] = ['offered', 'deposit-paid', 'confirmed', 'here']

/**
 * Somebody's place in a cohort, from the ask on. Alumni are students whose place is `finished`.
 *
 * Only `offered`, `deposit-paid`, `confirmed` and `here` take a bench: those have a slot, held by a unique index; a trigger keeps
 * slots within the cohort's number of places.
 */
export const BenchPlace = defineEntity({
  name: 'BenchPlace',
  properties: {
    id: id(),
    cohort: () => p.manyToOne(Cohort).ref(),
    /** The account; null until the place is paid for. */
    person: () => p.manyToOne(User).ref().nullable(),
    /** As asked; the account's own once there is one. */
    name: p.string().length(120).default(''),
    email: p.string().length(254).default(''),
    note: p.text().default(''),
    state: p.enum([...placeStates]),
    /** Bench number, 1 to the cohort's places; null when the state takes none. */
    slot: p.integer().nullable(),
    /** Order of asking within the cohort; null for places not asked for (roster, demo). */
    listNumber: p.integer().nullable(),
    askedAt: instant().nullable(),
    /** When the mailed link was opened: the address is real, and the place or the turn on the list is theirs. */
    openedAt: instant().nullable(),
    /** When the offer that stands was made. */
    offeredAt: instant().nullable(),
    /** Until when an offered place is held. */
    heldUntil: instant().nullable(),
    /** Offers that ran out or were let go; the turn on the list stays. */
    offersLetGo: p.integer().default(0),
    depositPaidAt: instant().nullable(),
    confirmedAt: instant().nullable(),
    /** Id of the place this one was moved from A place is moved once. */
    movedFromId: p.uuid().nullable(),
    endedAt: instant().nullable(),
    /** Who ended it and why: `student`, `school`, `illness`, `unsafe-work`, `not-paid`. */
    endedBecause: p.string().length(40).nullable(),
    finishedAt: instant().nullable(),
    /** Until when a finished student may read the lessons. */
    accessUntil: instant().nullable(),
    /** Grows when mailed links of this place should stop working. */
    linkVersion: p.integer().default(1),
    createdAt: instant().onCreate(() => new Date()),
  },
  uniques: [{ properties: ['cohort', 'listNumber'] }],
  checks: [
    { name: 'bench_place_bench_taken', expression: `(state <> ALL (ARRAY['offered'::text, 'deposit-paid'::text, 'confirmed'::text, 'here'::text])) OR (slot IS NOT NULL)` },
    { name: 'bench_place_bench_number', expression: '(slot IS NULL) OR (slot >= 1)' },
  ],
  indexes: [
    { name: 'bench_place_moved_once', expression: `create unique index "bench_place_moved_once" on "bench_place" ("moved_from_id") where "moved_from_id" is not null` },
    { properties: ['state', 'heldUntil'] },
    { properties: ['email'] },
    { properties: ['person'] },
    // Nobody twice in a cohort; somebody who cancelled or moved may come back to it.
    { name: 'bench_place_one_person', expression: `create unique index "bench_place_one_person" on "bench_place" ("cohort_id", "person_id") where "state" not in ('moved', 'cancelled', 'stopped')` },
    // A bench takes one person; states that take none have no part in it.
    { name: 'bench_place_slot_taken', expression: `create unique index "bench_place_slot_taken" on "bench_place" ("cohort_id", "slot") where "state" in ('offered', 'deposit-paid', 'confirmed', 'here')` },
    // One open offer an address, whichever cohort.
    { name: 'bench_place_one_offer', expression: `create unique index "bench_place_one_offer" on "bench_place" (lower("email")) where "state" = 'offered' and "email" <> ''` },
    { name: 'bench_place_one_ask', expression: `create unique index "bench_place_one_ask" on "bench_place" ("cohort_id", lower("email")) where "state" in ('asked', 'offered', 'waiting-list', 'deposit-paid', 'confirmed', 'here') and "email" <> ''` },
  ],
})
export type BenchPlace = InferEntity<typeof BenchPlace>
