/** Shapes a quantity known only by its bounds may be taken to have. */
export type BoundsShape = 'rectangular' | 'triangular' | 'arcsine' | 'trapezoid'

/**
 * Standard uncertainty of a quantity known to lie within ± `halfWidth`.
 *
 * Rectangular a/√3 (resolution, a maker's limit), triangular a/√6, arcsine a/√2 (something that swings),
 * symmetric trapezoid a·√((1 + β²)/6), whose top is β of its base: β 1 is rectangular, 0 triangular.
 *
 * Units: those of the half width.
 * Source: JCGM 100:2008, 4.3.7 and 4.3.9, equation (9a); arcsine JCGM 101:2008, 6.4.6.1 (from memory).
 *
 * @throws {RangeError} when the half width is negative or not finite, or β is outside 0 to 1
 */
export function standardUncertaintyOfBounds(halfWidth: number, shape: BoundsShape, beta = 1): number {
  if (!Number.isFinite(halfWidth) || halfWidth < 0) throw new RangeError('standardUncertaintyOfBounds requires a half width of at least zero')
  switch (shape) {
    case 'rectangular': return halfWidth / Math.sqrt(3)
    case 'triangular': return halfWidth / Math.sqrt(6)
    case 'arcsine': return halfWidth / Math.SQRT2
    case 'trapezoid':
      if (!(beta >= 0 && beta <= 1)) throw new RangeError('standardUncertaintyOfBounds requires a top between none and all of the base')
      return halfWidth * Math.sqrt((1 + beta * beta) / 6)
  }
}
