import type { PlaceState } from '#server/db/entities/BenchPlace'

/** States that take a bench: only these count against the cohort's number (handbook 5.4). */
export const takingStates: readonly PlaceState[] = ['offered', 'deposit-paid', 'confirmed', 'here']

/** States of an ask that is still alive: one an address and cohort. */
export const liveStates: readonly PlaceState[] = ['asked', 'waiting-list', ...takingStates]

export const takesBench = (state: PlaceState): boolean => takingStates.includes(state)
