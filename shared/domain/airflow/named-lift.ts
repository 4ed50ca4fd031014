import { assertPositive } from './assert-positive'

/**
 * A lift named as a share of the valve diameter: 0.27 D of a 41.0 mm valve is 11.07 mm.
 *
 * Units: mm.
 *
 * @throws {RangeError} unless both are above zero
 */
export function namedLift(valveMm: number, share: number): number {
  assertPositive('namedLift', { valve: valveMm, share })
  return valveMm * share
}
