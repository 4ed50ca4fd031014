import type { Evaluator } from '../evidence'
import { notRead, spotValues } from '../spot-values'

/** Every reading is judged and the worst decides. */
export const atEachSpot: Evaluator = (evidence, criterion, unit) => {
  const values = spotValues(evidence, criterion, unit)
  return values.length === 0 ? notRead(criterion.quantity, unit) : { values }
}
