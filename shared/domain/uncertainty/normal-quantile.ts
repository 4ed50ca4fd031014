import { findQuantile } from './find-quantile'
import { normalCdf } from './normal-cdf'

/**
 * The z that a standard normal variable stays under with probability p.
 *
 * @throws {RangeError} unless p lies strictly between 0 and 1
 * @example
 * normalQuantile(0.95) // => 1.6449
 */
export function normalQuantile(p: number): number {
  return findQuantile(normalCdf, p)
}
