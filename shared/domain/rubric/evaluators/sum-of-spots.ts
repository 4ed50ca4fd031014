import type { Evaluator } from '../evidence'
import { notRead, spotValues } from '../spot-values'

/** Counts and areas add up over the spots; {where} names the spots that have any. */
export const sumOfSpots: Evaluator = (evidence, criterion, unit) => {
  const values = spotValues(evidence, criterion, unit)
  const [first] = values
  if (!first) return notRead(criterion.quantity, unit)
  const found = values.filter(one => one.value > 0).map(one => one.at).filter((at): at is string => at !== null)
  const value = values.reduce((sum, one) => sum + one.value, 0)
  return {
    values: [{
      ...first,
      value,
      standardUncertainty: first.standardUncertainty === null ? null : Math.hypot(...values.map(one => one.standardUncertainty ?? 0)),
      degreesOfFreedom: null,
      at: found.length > 0 ? listed(found) : null,
      trace: [...values.flatMap(one => one.trace), { what: 'sum over the spots', sum: values.map(one => one.value).join(' + '), gives: String(value) }],
    }],
  }
}

/** Spots in one breath, but no longer than a line. */
function listed(spots: readonly string[]): string {
  const few = spots.slice(0, 4)
  return spots.length > few.length ? `${few.join(', ')} and ${spots.length - few.length} more` : few.join(', ')
}
