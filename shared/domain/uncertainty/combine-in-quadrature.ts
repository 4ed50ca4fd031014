/**
 * Combined standard uncertainty of independent contributions: √Σ(c u)².
 *
 * `sensitivities` are the partial derivatives, 1 each when left out. Correlated contributions do not belong here.
 *
 * Units: those of the result; each u times its sensitivity must be in it.
 * Source: JCGM 100:2008, 5.1.2, equation (10) (from memory).
 *
 * @throws {RangeError} with no contribution, a negative or non-finite one, or sensitivities of another length
 * @example
 * combineInQuadrature([12, 15 / Math.sqrt(3)]) // => 14.80
 */
export function combineInQuadrature(contributions: readonly number[], sensitivities?: readonly number[]): number {
  if (contributions.length === 0) throw new RangeError('combineInQuadrature requires at least one contribution')
  if (!contributions.every(u => Number.isFinite(u) && u >= 0)) throw new RangeError('combineInQuadrature requires finite contributions of at least zero')
  if (sensitivities && (sensitivities.length !== contributions.length || !sensitivities.every(Number.isFinite))) {
    throw new RangeError('combineInQuadrature requires one finite sensitivity for each contribution')
  }
  return Math.hypot(...contributions.map((u, index) => u * (sensitivities?.[index] ?? 1)))
}
