import { normalCdf } from '../uncertainty/normal-cdf'

/** A wall, the cut meant for it, and how well each is known. All mm. */
export interface PlannedCut {
  wallMm: number
  /** u of the wall; never less than half the gauge's U, because its zero error is shared by every point. */
  standardUncertainty: number
  /** Metal to be taken; 0 for none. */
  cutMm: number
  /** The hand's control of the cut, one standard deviation; counts only where something is cut. */
  handMm: number
  hardLeastMm: number
}

/**
 * Chance, 0 to 1, that the wall ends under the hard least after the cut: Φ((least - wall + cut) / √(u² + hand²)).
 *
 * Units: mm.
 * Source: handbook 8.9.
 *
 * @throws {RangeError} on a value that is not finite, a u not above zero, or a negative cut or hand
 * @example
 * chanceUnder({ wallMm: 4.26, standardUncertainty: 0.075, cutMm: 1, handMm: 0.15, hardLeastMm: 3 }) // => 0.0605
 */
export function chanceUnder({ wallMm, standardUncertainty, cutMm, handMm, hardLeastMm }: PlannedCut): number {
  if (![wallMm, standardUncertainty, cutMm, handMm, hardLeastMm].every(Number.isFinite)) throw new RangeError('chanceUnder requires finite lengths')
  if (!(standardUncertainty > 0)) throw new RangeError('chanceUnder requires a doubt above zero')
  if (cutMm < 0 || handMm < 0) throw new RangeError('chanceUnder requires a cut and a hand of at least zero')
  return normalCdf((hardLeastMm - wallMm + cutMm) / Math.hypot(standardUncertainty, cutMm > 0 ? handMm : 0))
}
