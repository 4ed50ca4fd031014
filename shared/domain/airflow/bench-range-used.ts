/** One reading as a share of the range it was taken on. */
export interface RangeReading { liftMm: number, fraction: number }

/**
 * The greatest share of a range used in a run, per cent, and where; null when the sheet says nothing of ranges.
 *
 * Units: mm, per cent.
 * Source: handbook 3.5 (bench limit: range over 97 %).
 *
 * @throws {RangeError} on a share that is negative or not finite
 */
export function benchRangeUsed(readings: readonly RangeReading[]): { percent: number, liftMm: number } | null {
  if (!readings.every(({ fraction }) => Number.isFinite(fraction) && fraction >= 0)) throw new RangeError('benchRangeUsed requires shares of at least zero')
  const [most] = [...readings].sort((a, b) => b.fraction - a.fraction)
  return most ? { percent: 100 * most.fraction, liftMm: most.liftMm } : null
}
