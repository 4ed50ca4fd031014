import { incompleteBeta } from './incomplete-beta'

/**
 * Probability that Student's t with the given degrees of freedom is at most t. The degrees need not be whole.
 *
 * Source: Abramowitz and Stegun 26.7.1 (from memory).
 *
 * @throws {RangeError} when t is NaN or the degrees of freedom are not above zero and finite
 * @example
 * studentTCdf(2.571, 5) // => 0.975
 */
export function studentTCdf(t: number, degreesOfFreedom: number): number {
  if (Number.isNaN(t)) throw new RangeError('studentTCdf requires a number')
  if (!(degreesOfFreedom > 0) || !Number.isFinite(degreesOfFreedom)) throw new RangeError('studentTCdf requires degrees of freedom above zero')
  if (!Number.isFinite(t)) return t > 0 ? 1 : 0
  const square = t * t
  // Near the middle 1 - x loses digits, so the share beyond the middle is taken directly.
  if (square < degreesOfFreedom) {
    const middle = incompleteBeta(square / (degreesOfFreedom + square), 0.5, degreesOfFreedom / 2) / 2
    return t > 0 ? 0.5 + middle : 0.5 - middle
  }
  const tail = incompleteBeta(degreesOfFreedom / (degreesOfFreedom + square), degreesOfFreedom / 2, 0.5) / 2
  return t > 0 ? 1 - tail : tail
}
