/** One contribution to a combined uncertainty; `degreesOfFreedom` null means taken as infinite (type B). */
export interface Contribution { standardUncertainty: number, degreesOfFreedom: number | null }

/**
 * Effective degrees of freedom of a combined uncertainty (Welch and Satterthwaite); null when infinite.
 *
 * The combined uncertainty is formed here from the unrounded contributions: rounding it first changes the answer noticeably.
 *
 * Units: one unit throughout.
 * Source: JCGM 100:2008, G.4.1, equation (G.2b) (from memory).
 *
 * @throws {RangeError} with no contribution, a negative or non-finite one, degrees of freedom not above zero, or all of them zero
 * @example
 * effectiveDegreesOfFreedom([{ standardUncertainty: 3, degreesOfFreedom: 4 }, { standardUncertainty: 4, degreesOfFreedom: null }])
 * // => 5^4 / (3^4 / 4) = 30.86
 */
export function effectiveDegreesOfFreedom(contributions: readonly Contribution[]): number | null {
  if (contributions.length === 0) throw new RangeError('effectiveDegreesOfFreedom requires at least one contribution')
  for (const { standardUncertainty: u, degreesOfFreedom: nu } of contributions) {
    if (!Number.isFinite(u) || u < 0) throw new RangeError('effectiveDegreesOfFreedom requires finite contributions of at least zero')
    if (nu !== null && !(nu > 0)) throw new RangeError('effectiveDegreesOfFreedom requires degrees of freedom above zero')
  }
  const combined = Math.hypot(...contributions.map(({ standardUncertainty }) => standardUncertainty))
  if (combined === 0) throw new RangeError('effectiveDegreesOfFreedom requires a contribution above zero')
  // Shares of the whole, so that very small units do not underflow at the fourth power.
  const denominator = contributions.reduce((sum, { standardUncertainty, degreesOfFreedom }) =>
    degreesOfFreedom === null ? sum : sum + (standardUncertainty / combined) ** 4 / degreesOfFreedom, 0)
  return denominator === 0 ? null : 1 / denominator
}
