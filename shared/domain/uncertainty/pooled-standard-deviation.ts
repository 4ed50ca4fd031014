/** Spread pooled over groups of repeats. */
export interface PooledSpread { standardDeviation: number, degreesOfFreedom: number }

/**
 * Standard deviation of repeats pooled over groups that have different means; groups of one add nothing.
 *
 * Units: those of the values.
 * Source: ISO 5725-2 idea (from memory); √(Σ(nᵢ-1)sᵢ² / Σ(nᵢ-1)).
 *
 * @throws {RangeError} when no group has two values, or a value is not finite
 */
export function pooledStandardDeviation(groups: readonly (readonly number[])[]): PooledSpread {
  let squares = 0
  let degreesOfFreedom = 0
  for (const group of groups) {
    if (!group.every(Number.isFinite)) throw new RangeError('pooledStandardDeviation requires finite values')
    if (group.length < 2) continue
    const mean = group.reduce((sum, value) => sum + value, 0) / group.length
    squares += group.reduce((sum, value) => sum + (value - mean) ** 2, 0)
    degreesOfFreedom += group.length - 1
  }
  if (degreesOfFreedom === 0) throw new RangeError('pooledStandardDeviation requires a group with at least two values')
  return { standardDeviation: Math.sqrt(squares / degreesOfFreedom), degreesOfFreedom }
}
