/** A straight line by least squares, y = intercept + slope (x - origin). */
export interface FittedLine {
  slope: number
  intercept: number
  origin: number
  slopeUncertainty: number
  interceptUncertainty: number
  /** Between slope and intercept. */
  correlation: number
  /** Of the points about the line, n - 2 in the divisor. */
  residualStandardDeviation: number
  degreesOfFreedom: number
}

/**
 * Ordinary least squares line, with the uncertainties its own scatter gives.
 *
 * Units: those of x and y. `origin` is where the intercept is taken; away from the points it grows and correlates with the slope.
 * Source: JCGM 100:2008, H.3 (from memory).
 *
 * @throws {RangeError} with fewer than three points, lengths that differ, a value that is not finite, or all x the same
 */
export function leastSquaresLine(x: readonly number[], y: readonly number[], origin = 0): FittedLine {
  const n = x.length
  if (n !== y.length) throw new RangeError('leastSquaresLine requires as many x as y')
  if (n < 3) throw new RangeError('leastSquaresLine requires at least three points')
  if (![...x, ...y, origin].every(Number.isFinite)) throw new RangeError('leastSquaresLine requires finite points')
  const meanX = x.reduce((sum, value) => sum + value, 0) / n
  const meanY = y.reduce((sum, value) => sum + value, 0) / n
  const sxx = x.reduce((sum, value) => sum + (value - meanX) ** 2, 0)
  if (sxx === 0) throw new RangeError('leastSquaresLine requires points at more than one x')
  const sxy = x.reduce((sum, value, i) => sum + (value - meanX) * ((y[i] as number) - meanY), 0)
  const slope = sxy / sxx
  const away = origin - meanX
  const squares = x.reduce((sum, value, i) => sum + ((y[i] as number) - meanY - slope * (value - meanX)) ** 2, 0)
  const s = Math.sqrt(squares / (n - 2))
  const factor = Math.sqrt(1 / n + away * away / sxx)
  return {
    slope,
    intercept: meanY + slope * away,
    origin,
    slopeUncertainty: s / Math.sqrt(sxx),
    interceptUncertainty: s * factor,
    correlation: away / Math.sqrt(sxx) / factor,
    residualStandardDeviation: s,
    degreesOfFreedom: n - 2,
  }
}
