import type { CriterionState } from '#shared/domain/rubric/criterion'

const worst: Record<CriterionState, number> = { 'reject': 0, 'borderline': 1, 'not-assessed': 2, 'accept': 3, 'does-not-apply': 4 }
/** States that somebody still has to deal with. */
const open = (state: CriterionState) => state === 'reject' || state === 'borderline' || state === 'not-assessed'

/** Stops that stand first, then open musts, then what else is open, then the rest; the worst first within each, the rubric's order where they are equal. */
export function orderRows<Row extends { stop: boolean, must: boolean, state: CriterionState }>(rows: readonly Row[]): Row[] {
  const group = (row: Row) => !open(row.state) ? 3 : row.stop ? 0 : row.must ? 1 : 2
  return [...rows].sort((a, b) => group(a) - group(b) || worst[a.state] - worst[b.state])
}

/** The result a criterion is judged by: its worst. The first one where they are equal. */
export function worstFirst<Result extends { state: CriterionState }>(results: readonly Result[]): Result[] {
  return [...results].sort((a, b) => worst[a.state] - worst[b.state])
}
