import { median } from './median'

/** A line that one bad point in four cannot move far. */
export interface RobustLine {
  slope: number
  intercept: number
  /** 1.4826 times the median absolute deviation from the line: a standard deviation, outliers left out. */
  scatter: number
  /** y less the line, in the order given. */
  residuals: number[]
}

/** Makes the median absolute deviation of a normal scatter equal to its standard deviation: 1 / Φ⁻¹(3/4). */
const madToSigma = 1.482602218505602

/**
 * Theil and Sen's line: the slope is the median of the slopes between all pairs of points, the intercept the median of what is left.
 *
 * Units: those of x and y.
 * Source: Sen, J. Am. Stat. Assoc. 63 (1968) 1379 (from memory).
 *
 * @throws {RangeError} with fewer than three points, lengths that differ, a value that is not finite, or all x the same
 */
export function theilSenLine(x: readonly number[], y: readonly number[]): RobustLine {
  if (x.length !== y.length) throw new RangeError('theilSenLine requires as many x as y')
  if (x.length < 3) throw new RangeError('theilSenLine requires at least three points')
  if (![...x, ...y].every(Number.isFinite)) throw new RangeError('theilSenLine requires finite points')
  const slopes: number[] = []
  x.forEach((xi, i) => {
    for (let j = i + 1; j < x.length; j++) {
      const run = (x[j] as number) - xi
      if (run !== 0) slopes.push(((y[j] as number) - (y[i] as number)) / run)
    }
  })
  if (slopes.length === 0) throw new RangeError('theilSenLine requires points at more than one x')
  const slope = median(slopes)
  const intercept = median(y.map((yi, i) => yi - slope * (x[i] as number)))
  const residuals = y.map((yi, i) => yi - slope * (x[i] as number) - intercept)
  return { slope, intercept, scatter: madToSigma * median(residuals.map(Math.abs)), residuals }
}
