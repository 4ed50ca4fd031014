import type { CriterionState, EndKind } from './criterion'
import type { ResolvedBand } from './pick-band'

/** What the decision rule says of one value. */
export interface Decision {
  state: Extract<CriterionState, 'accept' | 'borderline' | 'reject'>
  /** End of the accept interval that was not met; null when accepted. */
  end: 'low' | 'high' | null
  /** Beyond that end metal is gone ("past"), or it can still be done ("short"); null when accepted. */
  beyond: 'past' | 'short' | null
}

/** Sums of decimals typed by people differ from each other in the sixteenth digit; a limit met exactly is met. */
const closeEnough = 1e-9

/**
 * The decision rule, with doubt.
 *
 * Accept: at a no-return end a must clears the limit by U; at an end that can be put right, and for every criterion that is
 * not a must, the value alone is tested; a natural end is never tested.
 * Reject: for a must, all of [y - U, y + U] outside the hull of accept and soft; for others, y outside it; natural ends count as infinite.
 * Borderline: anything else.
 *
 * Units: value, U and band in one unit. U is k = 2; null for counts and yes/no, which have none.
 * Source: handbook 3.1 (after the guard bands of ISO 14253-1 and JCGM 106, from memory).
 *
 * @throws {RangeError} when the value is not finite, or U is negative or not finite
 * @example
 * // Land 1.56 ± 0.08 against 1.52 (no return) to 1.78 (can be put right), a must:
 * decide(1.56, 0.08, band, true) // => { state: 'borderline', end: 'low', beyond: 'past' }
 */
export function decide(value: number, expandedUncertainty: number | null, band: ResolvedBand, must: boolean): Decision {
  if (!Number.isFinite(value)) throw new RangeError('decide requires a finite value')
  if (expandedUncertainty !== null && !(expandedUncertainty >= 0 && Number.isFinite(expandedUncertainty))) throw new RangeError('decide requires an uncertainty of at least zero')
  const doubt = must ? expandedUncertainty ?? 0 : 0
  const slack = closeEnough * Math.max(1, Math.abs(value))

  const meets = (end: number | null, kind: EndKind, inside: number): boolean => {
    if (end === null || kind === 'natural') return true
    return inside - (kind === 'no-return' ? doubt : 0) >= -slack
  }
  const lowMet = meets(band.lo, band.loKind, value - (band.lo ?? 0))
  const highMet = meets(band.hi, band.hiKind, (band.hi ?? 0) - value)
  if (lowMet && highMet) return { state: 'accept', end: null, beyond: null }

  const rejectLow = band.softLo !== null && band.loKind !== 'natural' && value + doubt < band.softLo - slack
  const rejectHigh = band.softHi !== null && band.hiKind !== 'natural' && value - doubt > band.softHi + slack
  const end = rejectHigh || (!rejectLow && lowMet) ? 'high' : 'low'
  return {
    state: rejectLow || rejectHigh ? 'reject' : 'borderline',
    end,
    beyond: (end === 'low' ? band.loKind : band.hiKind) === 'no-return' ? 'past' : 'short',
  }
}
