import type { Criterion } from './criterion'
import { score, statesByCriterion, type ScoredResult } from './score'

export type StageWord = 'not yet' | 'Sound' | 'Workable' | 'Rework'

/**
 * The word for a stage, the first of these that holds:
 * *not yet* when a must is not assessed anywhere; *Sound* at 85 or more with no reject anywhere; *Workable* at 70 or more with no
 * must rejected; *Rework* for the rest.
 *
 * Source: handbook 3.3.
 *
 * @throws {RangeError} as `score`
 */
export function word(results: readonly ScoredResult[], criteria: readonly Criterion[]): StageWord {
  const musts = new Set(criteria.filter(criterion => criterion.mustPass).map(criterion => criterion.id))
  // Every result is asked, not the worst one alone: a must rejected at one port may still be unseen at another.
  if (results.some(result => musts.has(result.criterion) && result.state === 'not-assessed')) return 'not yet'
  const points = score(results, criteria)
  if (points === null) return 'not yet'
  const states = [...statesByCriterion(results)]
  const rejected = states.filter(([, state]) => state === 'reject').map(([id]) => id)
  if (points >= 85 && rejected.length === 0) return 'Sound'
  if (points >= 70 && !rejected.some(id => musts.has(id))) return 'Workable'
  return 'Rework'
}
