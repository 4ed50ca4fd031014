import { chanceOfConforming } from '../uncertainty/chance-of-conforming'
import type { ResolvedBand } from './pick-band'

/**
 * Chance, 0 to 1, that the true value lies in the accept interval; null where there is no doubt to speak of.
 *
 * A natural end counts as infinite: the quantity cannot be beyond it, whatever the reading says.
 *
 * Units: value, U (k = 2) and band in one unit.
 * Source: handbook 3.1, "Probability form".
 *
 * @throws {RangeError} as `chanceOfConforming`
 */
export function chanceOfAccept(value: number, expandedUncertainty: number | null, degreesOfFreedom: number | null, band: ResolvedBand): number | null {
  if (expandedUncertainty === null || expandedUncertainty === 0) return null
  const lower = band.loKind === 'natural' ? null : band.lo
  const upper = band.hiKind === 'natural' ? null : band.hi
  return chanceOfConforming(value, expandedUncertainty / 2, degreesOfFreedom, { lower, upper })
}
