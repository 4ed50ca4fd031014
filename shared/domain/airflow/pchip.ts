/** A curve through points that never overshoots them. */
export interface Pchip {
  /** Value at x. @throws {RangeError} outside the points: the curve does not guess beyond them */
  at: (x: number) => number
  /** Exact integral between the first and last point. */
  integral: number
  slopes: readonly number[]
}

/**
 * Piecewise cubic through points, monotone wherever they are (Fritsch and Butland's slopes).
 *
 * Inner slopes are the weighted harmonic mean of the two secants, zero where they change sign; end slopes by the three-point
 * formula, held back so that the end does not turn. Other libraries' "Fritsch-Carlson" gives other numbers.
 *
 * Units: those of x and y.
 * Source: Fritsch and Butland, SIAM J. Sci. Stat. Comput. 5 (1984) 300-304, as in SLATEC's PCHIM.
 *
 * @throws {RangeError} with fewer than two points, x not rising, or a value that is not finite
 */
export function pchip(x: readonly number[], y: readonly number[]): Pchip {
  const n = x.length
  if (n < 2 || y.length !== n) throw new RangeError('pchip requires at least two points, as many x as y')
  if (![...x, ...y].every(Number.isFinite)) throw new RangeError('pchip requires finite points')
  const h: number[] = []
  const s: number[] = []
  for (let i = 0; i < n - 1; i++) {
    const step = (x[i + 1] as number) - (x[i] as number)
    if (!(step > 0)) throw new RangeError('pchip requires x that rises from point to point')
    h.push(step)
    s.push(((y[i + 1] as number) - (y[i] as number)) / step)
  }
  const slopes = slopesOf(h, s)

  const at = (where: number): number => {
    const first = x[0] as number
    const last = x[n - 1] as number
    if (!(where >= first && where <= last)) throw new RangeError(`pchip has no value at ${where}: its points run from ${first} to ${last}`)
    let i = 0
    while (i < n - 2 && where > (x[i + 1] as number)) i++
    const step = h[i] as number
    const t = (where - (x[i] as number)) / step
    const u = 1 - t
    return (1 + 2 * t) * u * u * (y[i] as number) + t * u * u * step * (slopes[i] as number)
      + t * t * (3 - 2 * t) * (y[i + 1] as number) - t * t * u * step * (slopes[i + 1] as number)
  }
  const integral = h.reduce((sum, step, i) =>
    sum + step * ((y[i] as number) + (y[i + 1] as number)) / 2 + step * step * ((slopes[i] as number) - (slopes[i + 1] as number)) / 12, 0)
  return { at, integral, slopes }
}

function slopesOf(h: readonly number[], s: readonly number[]): number[] {
  const n = h.length + 1
  const first = s[0] as number
  if (n === 2) return [first, first]
  const slopes = [endSlope(h[0] as number, h[1] as number, first, s[1] as number)]
  for (let i = 1; i < n - 1; i++) {
    const before = s[i - 1] as number
    const after = s[i] as number
    if (before * after <= 0) {
      slopes.push(0)
      continue
    }
    const w1 = 2 * (h[i] as number) + (h[i - 1] as number)
    const w2 = (h[i] as number) + 2 * (h[i - 1] as number)
    slopes.push((w1 + w2) / (w1 / before + w2 / after))
  }
  slopes.push(endSlope(h[n - 2] as number, h[n - 3] as number, s[n - 2] as number, s[n - 3] as number))
  return slopes
}

function endSlope(h0: number, h1: number, s0: number, s1: number): number {
  const slope = ((2 * h0 + h1) * s0 - h0 * s1) / (h0 + h1)
  if (Math.sign(slope) !== Math.sign(s0)) return 0
  if (Math.sign(s0) !== Math.sign(s1) && Math.abs(slope) > 3 * Math.abs(s0)) return 3 * s0
  return slope
}
