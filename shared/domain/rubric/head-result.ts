import type { Criterion, CriterionState } from './criterion'
import { score, statesByCriterion } from './score'
import { word, type StageWord } from './word'

/** A result of a head as it stands at the end: the person's state where there is one. */
export interface HeadRow { criterion: string, state: CriterionState, /** Chance of conforming; null where nothing was measured. */ pConform: number | null, text: string }
export interface HeadResult {
  word: StageWord
  /** 0 to 100; null when nothing was assessed. */
  score: number | null
  /** Up to three criteria accepted everywhere: what counts most first, then what was surest. */
  best: Criterion[]
  /** What was rejected, else borderline, that counts most; null when everything was accepted. */
  workOn: { criterion: Criterion, text: string } | null
}

/**
 * A whole head's result: the stage rule over every criterion of its route. A must that nobody ever looked at leaves the head *not yet*.
 *
 * Source: handbook 3.3 for score and word. Taking it over all stages at once, and which three are named: school design, no source.
 *
 * @throws {RangeError} on a result of a criterion that is not given
 */
export function headResult(rows: readonly HeadRow[], criteria: readonly Criterion[]): HeadResult {
  const unseen = criteria.filter(one => one.mustPass && !rows.some(row => row.criterion === one.id)).map(one => ({ criterion: one.id, state: 'not-assessed' as const }))
  const states = statesByCriterion(rows)
  const chance = (id: string) => Math.min(...rows.filter(row => row.criterion === id).map(row => row.pConform ?? 1))
  const counts = (one: Criterion, other: Criterion) => other.weight - one.weight
  const weak = (['reject', 'borderline'] as const).flatMap(state => criteria.filter(one => states.get(one.id) === state).sort(counts))[0]
  return {
    word: word([...rows, ...unseen], criteria),
    score: score(rows, criteria),
    best: criteria.filter(one => states.get(one.id) === 'accept').sort((one, other) => counts(one, other) || chance(other.id) - chance(one.id)).slice(0, 3),
    workOn: weak ? { criterion: weak, text: rows.find(row => row.criterion === weak.id && row.state === states.get(weak.id))?.text ?? '' } : null,
  }
}
