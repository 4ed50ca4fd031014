import type { Evaluated } from '../../uncertainty/evaluated'
import type { ReadingEvidence } from '../evidence'
import { readingValue } from '../reading-value'

/**
 * One reading less another, each with its own doubt.
 *
 * @throws {RangeError} as `readingValue`
 */
export function difference(what: string, one: ReadingEvidence, other: ReadingEvidence, unit: string, at: string | null): Evaluated {
  const [a, b] = [readingValue(one, unit), readingValue(other, unit)]
  const value = a.value - b.value
  return {
    value, unit, standardUncertainty: Math.hypot(a.standardUncertainty ?? 0, b.standardUncertainty ?? 0), degreesOfFreedom: null, at, liftMm: null,
    trace: [...a.trace, ...b.trace, { what, sum: `${a.value.toFixed(2)} - ${b.value.toFixed(2)}`, gives: `${value.toFixed(2)} ${unit}` }],
  }
}
