/**
 * Probability that a standard normal variable is at most z.
 *
 * Below |z| = 3 by the series of the integral, above by the continued fraction of the tail (Abramowitz and Stegun 26.2.11
 * and 26.2.14, from memory); good to about 1e-14.
 *
 * @throws {RangeError} when z is NaN
 * @example
 * normalCdf(1.96) // => 0.9750
 */
export function normalCdf(z: number): number {
  if (Number.isNaN(z)) throw new RangeError('normalCdf requires a number')
  if (z === Infinity) return 1
  if (z === -Infinity) return 0
  const size = Math.abs(z)
  const density = Math.exp(-size * size / 2) / Math.sqrt(2 * Math.PI)
  let tail: number
  if (size < 3) {
    let term = size
    let sum = size
    for (let n = 3; Math.abs(term) > 1e-17 * sum; n += 2) {
      term *= size * size / n
      sum += term
    }
    tail = 0.5 - density * sum
  }
  else {
    // Sixty terms are far more than a tail beyond three needs; evaluated from the inside out.
    let fraction = 0
    for (let n = 60; n >= 1; n--) fraction = n / (size + fraction)
    tail = density / (size + fraction)
  }
  return z > 0 ? 1 - tail : tail
}
