import { takingStates, type PlaceState } from '#server/db/entities/BenchPlace'

/** States of an ask that is still alive: one an address and cohort. */
export const liveStates: readonly PlaceState[] = ['asked', 'waiting-list', ...takingStates]

export const takesBench = (state: PlaceState): boolean => takingStates.includes(state)
