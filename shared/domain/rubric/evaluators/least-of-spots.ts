import type { Evaluator } from '../evidence'
import { extreme, notRead, spotValues } from '../spot-values'

/** The least reading is the value: thickness, gap, radius. */
export const leastOfSpots: Evaluator = (evidence, criterion, unit) => {
  const least = extreme(spotValues(evidence, criterion, unit), 'least')
  return least === null ? notRead(criterion.quantity, unit) : { values: [least] }
}
