import type { Criterion, CriterionState } from './criterion'
import { worstState } from './worst-state'

/** A result reduced to what the score needs. The caller passes the person's state where there is one. */
export interface ScoredResult { criterion: string, state: CriterionState }

/** Worth of a state; the others are left out of the sum. */
const worth: Partial<Record<CriterionState, number>> = { accept: 1, borderline: 0.6, reject: 0 }

/**
 * Score of a stage, 0 to 100: 100 Σ(w s)/Σ(w) over the criteria assessed; null when none was.
 *
 * Accept is worth 1, borderline 0.6, reject 0. A criterion counts once, with its worst result; *not assessed* and
 * *does not apply* are left out.
 *
 * Source: handbook 3.3.
 *
 * @throws {RangeError} on a result of a criterion that is not given
 */
export function score(results: readonly ScoredResult[], criteria: readonly Criterion[]): number | null {
  const states = statesByCriterion(results)
  let sum = 0
  let weights = 0
  for (const [id, state] of states) {
    const criterion = criteria.find(one => one.id === id)
    if (!criterion) throw new RangeError(`score was given a result of "${id}", which is not among the criteria`)
    const points = worth[state]
    if (points === undefined) continue
    sum += criterion.weight * points
    weights += criterion.weight
  }
  return weights === 0 ? null : 100 * sum / weights
}

/** State of each criterion that has results, in the order the results come. */
export function statesByCriterion(results: readonly ScoredResult[]): Map<string, CriterionState> {
  const all = new Map<string, CriterionState[]>()
  for (const { criterion, state } of results) all.set(criterion, [...all.get(criterion) ?? [], state])
  return new Map([...all].map(([id, states]) => [id, worstState(states)]))
}
