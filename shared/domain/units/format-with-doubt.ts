import { roundToDoubt } from './round-to-doubt'

/**
 * A value with its doubt and unit in one line, as people see it everywhere.
 *
 * @throws {RangeError} as `roundToDoubt`
 * @example
 * formatWithDoubt(36.4967, 0.06, 'mm') // => '36.497 ± 0.060 mm'
 */
export function formatWithDoubt(value: number, expandedUncertainty: number, unit: string): string {
  const shown = roundToDoubt(value, expandedUncertainty)
  return `${shown.value} ± ${shown.doubt} ${unit}`.trim()
}
