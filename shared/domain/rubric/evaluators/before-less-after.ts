import { baseUnit } from '../base-unit'
import type { Evaluator } from '../evidence'
import { difference } from './difference-of-readings'
import { pair, bothWanted } from './before-and-after'

/** Shortened, lowered: before less after. */
export const beforeLessAfter: Evaluator = (evidence, criterion, unit) => {
  const { before, after } = pair(evidence, criterion, unit, null)
  return before && after ? { values: [difference('before less after', before, after, baseUnit(criterion.unit), null)] } : bothWanted
}
