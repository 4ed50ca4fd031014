/**
 * The z at which a rising distribution function, symmetric about zero, reaches p: bracketed, then halved to the last digit.
 *
 * @throws {RangeError} unless p lies strictly between 0 and 1
 */
export function findQuantile(cdf: (z: number) => number, p: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError('findQuantile requires a probability between 0 and 1')
  if (p === 0.5) return 0
  // Works on the lower tail, where small probabilities keep their digits.
  const small = Math.min(p, 1 - p)
  let low = -1
  while (cdf(low) > small && low > -1e12) low *= 2
  let high = 0
  for (let i = 0; i < 200 && high - low > 1e-15 * Math.abs(low); i++) {
    const middle = (low + high) / 2
    if (cdf(middle) < small) low = middle
    else high = middle
  }
  const z = (low + high) / 2
  return p < 0.5 ? z : -z
}
