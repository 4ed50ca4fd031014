import type { Instrument } from '#server/db/entities/Instrument'
import { convert } from '#shared/domain/units/convert'

/**
 * Expanded uncertainty (k = 2) of an instrument at these readings, in their unit: the instrument's own, or its share of the mean where
 * its doubt goes with the value.
 *
 * @param values base unit, at least one
 */
export function instrumentDoubt({ expandedU, relative, unit }: Pick<Instrument, 'expandedU' | 'relative' | 'unit'>, values: readonly number[], baseUnit: string): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length
  if (relative) return Math.abs(mean) * expandedU / 100
  // As a difference, so that a scale with another zero (degF) gives an interval and not a temperature.
  return unit === baseUnit ? expandedU : convert(expandedU, unit, baseUnit) - convert(0, unit, baseUnit)
}
