import type { Evaluator } from '../evidence'
import { extreme, notRead, spotValues } from '../spot-values'

/** Least land round the ring: the width along the seat face at the clocks wanted. Source: handbook 3.5. */
export const seatLand: Evaluator = (evidence, criterion, unit) => {
  const least = extreme(spotValues(evidence, criterion, unit, 'seat-land'), 'least')
  return least === null ? notRead('seat-land', unit) : { values: [least] }
}
