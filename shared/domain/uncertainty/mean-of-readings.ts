/** Mean of repeats with its combined standard uncertainty. */
export interface MeanOfReadings {
  value: number
  standardUncertainty: number
  /** Of the readings among themselves, n - 1 in the divisor. */
  standardDeviation: number
  count: number
}

/**
 * Mean of repeated readings of one quantity, with its combined standard uncertainty.
 *
 * Two independent contributions, added in quadrature:
 * - scatter of the readings, s / √n;
 * - resolution of the display, (resolution / 2) / √3, a rectangular distribution.
 *
 * Not included: calibration error of the instrument, temperature, contact force.
 * The caller adds those as terms of their own.
 *
 * Units: any one unit throughout; our callers pass millimetres.
 * Source: JCGM 100:2008, 4.2.1 to 4.2.3 (scatter), 4.3.7 (rectangular), 5.1.2 (combination); clause numbers from memory.
 *
 * @throws {RangeError} with fewer than two readings, a reading that is not finite,
 *   or a resolution that is not above zero
 * @example
 * meanOfReadings([41.98, 42.01, 42.0], 0.01)
 * // => { value: 41.9967, standardUncertainty: 0.0093, standardDeviation: 0.0153, count: 3 }  (rounded)
 */
export function meanOfReadings(readings: readonly number[], resolution: number): MeanOfReadings {
  const count = readings.length
  if (count < 2) throw new RangeError('meanOfReadings requires at least two readings')
  if (!readings.every(Number.isFinite)) throw new RangeError('meanOfReadings requires finite readings')
  if (!(resolution > 0) || !Number.isFinite(resolution)) throw new RangeError('meanOfReadings requires a resolution above zero')

  const value = readings.reduce((sum, reading) => sum + reading, 0) / count

  // Two passes: subtracting the mean first keeps the digits that matter when the
  // readings agree to many figures, as caliper readings do.
  const sumOfSquares = readings.reduce((sum, reading) => sum + (reading - value) ** 2, 0)
  const standardDeviation = Math.sqrt(sumOfSquares / (count - 1))
  const fromScatter = standardDeviation / Math.sqrt(count)
  const fromResolution = resolution / 2 / Math.sqrt(3)

  return { value, standardUncertainty: Math.hypot(fromScatter, fromResolution), standardDeviation, count }
}
