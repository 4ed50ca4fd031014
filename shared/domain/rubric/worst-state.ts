import type { CriterionState } from './criterion'

/** From the state that weighs most to the one that weighs nothing. */
const order: readonly CriterionState[] = ['reject', 'not-assessed', 'borderline', 'accept', 'does-not-apply']

/**
 * The worst of several states: a criterion's state is its worst result's. `not-assessed` with none.
 *
 * Not assessed is worse than borderline: it opens nothing, and nobody has seen what it would have been.
 */
export function worstState(states: readonly CriterionState[]): CriterionState {
  return order.find(state => states.includes(state)) ?? 'not-assessed'
}
