import { normalCdf } from './normal-cdf'
import { studentTCdf } from './student-t-cdf'

/** The interval asked about; null is an end that is not there. */
export interface ConformityLimits { lower: number | null, upper: number | null }

/** Below this many effective degrees of freedom Student's t is used (school rule, handbook 3.1). */
const normalFrom = 30

/**
 * Chance that the quantity lies inside the limits, given its value and standard uncertainty and nothing else (flat prior).
 *
 * F((y-a)/u) - F((y-b)/u), F being normal, or Student's t where the effective degrees of freedom are under 30.
 * `degreesOfFreedom` null is infinite. With no limits at all the chance is 1.
 *
 * Units: value, limits and u in one unit.
 * Source: JCGM 106:2012, 7.2 to 7.4 (from memory); the handbook's 3.1.
 *
 * @throws {RangeError} on a value or limit that is not finite, limits the wrong way round, or a u that is not above zero
 * @example
 * chanceOfConforming(13.6, 1.8, null, { lower: 12.5, upper: 16.3 }) // => 0.663
 */
export function chanceOfConforming(value: number, standardUncertainty: number, degreesOfFreedom: number | null, limits: ConformityLimits): number {
  const { lower, upper } = limits
  if (!Number.isFinite(value)) throw new RangeError('chanceOfConforming requires a finite value')
  if (!(standardUncertainty > 0) || !Number.isFinite(standardUncertainty)) throw new RangeError('chanceOfConforming requires a standard uncertainty above zero')
  if (degreesOfFreedom !== null && !(degreesOfFreedom > 0)) throw new RangeError('chanceOfConforming requires degrees of freedom above zero')
  if ((lower !== null && !Number.isFinite(lower)) || (upper !== null && !Number.isFinite(upper))) throw new RangeError('chanceOfConforming requires finite limits')
  if (lower !== null && upper !== null && lower > upper) throw new RangeError('chanceOfConforming requires the lower limit first')

  const cdf = degreesOfFreedom !== null && degreesOfFreedom < normalFrom
    ? (z: number) => studentTCdf(z, degreesOfFreedom)
    : normalCdf
  // Taken as the whole less the two tails outside: each tail is small and keeps its digits.
  const below = lower === null ? 0 : cdf((lower - value) / standardUncertainty)
  const above = upper === null ? 0 : cdf((value - upper) / standardUncertainty)
  return Math.min(1, Math.max(0, 1 - below - above))
}
