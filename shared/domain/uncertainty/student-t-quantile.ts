import { findQuantile } from './find-quantile'
import { studentTCdf } from './student-t-cdf'

/**
 * The t that Student's t with these degrees of freedom stays under with probability p.
 *
 * @throws {RangeError} unless p lies strictly between 0 and 1 and the degrees of freedom are above zero
 * @example
 * studentTQuantile(0.975, 10) // => 2.228
 */
export function studentTQuantile(p: number, degreesOfFreedom: number): number {
  return findQuantile(t => studentTCdf(t, degreesOfFreedom), p)
}
