import type { Evaluator } from '../evidence'
import { extreme, notRead, spotValues } from '../spot-values'

/** The greatest reading is the value: a bow, a drop, a step. */
export const greatestOfSpots: Evaluator = (evidence, criterion, unit) => {
  const greatest = extreme(spotValues(evidence, criterion, unit), 'greatest')
  return greatest === null ? notRead(criterion.quantity, unit) : { values: [greatest] }
}
