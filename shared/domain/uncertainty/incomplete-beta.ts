/**
 * Regularised incomplete beta function I_x(a, b), the building block of Student's t.
 *
 * Continued fraction by the modified Lentz method; good to about 1e-13 for the sizes met here.
 * Source: Abramowitz and Stegun 26.5.8 (from memory).
 *
 * @throws {RangeError} when a or b is not above zero, or x is outside 0 to 1
 */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (!(a > 0) || !(b > 0)) throw new RangeError('incompleteBeta requires a and b above zero')
  if (!(x >= 0 && x <= 1)) throw new RangeError('incompleteBeta requires x between 0 and 1')
  if (x === 0 || x === 1) return x
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x))
  // The fraction converges quickly only on this side of the mean; the other side is its mirror.
  if (x < (a + 1) / (a + b + 2)) return front * fraction(x, a, b) / a
  return 1 - front * fraction(1 - x, b, a) / b
}

function fraction(x: number, a: number, b: number): number {
  const tiny = 1e-300
  const guard = (value: number) => Math.abs(value) < tiny ? tiny : value
  let c = 1
  let d = 1 / guard(1 - (a + b) * x / (a + 1))
  let result = d
  for (let m = 1; m <= 500; m++) {
    const even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / guard(1 + even * d)
    c = guard(1 + even / c)
    result *= d * c
    const odd = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / guard(1 + odd * d)
    c = guard(1 + odd / c)
    const step = d * c
    result *= step
    if (Math.abs(step - 1) < 1e-15) return result
  }
  return result
}

/** ln Γ(x) for x > 0: recurrence up to 15, then Stirling's series. */
function logGamma(x: number): number {
  let shift = 0
  let y = x
  while (y < 15) {
    shift -= Math.log(y)
    y += 1
  }
  const inverse = 1 / (y * y)
  const series = (1 / 12 - inverse * (1 / 360 - inverse * (1 / 1260 - inverse * (1 / 1680 - inverse / 1188)))) / y
  return shift + (y - 0.5) * Math.log(y) - y + 0.5 * Math.log(2 * Math.PI) + series
}
