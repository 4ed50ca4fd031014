import { assertPositive } from './assert-positive'
import { effectiveAreaMm2 } from './curtain-coefficient'
import { smallestOpening, type ValveOnSeat } from './smallest-opening'

/**
 * Discharge coefficient on the smallest geometric opening. Over one is more air than a perfect nozzle would pass: the sheet is
 * wrong, not the port. The stricter of the two near the seat, where leaks and wrong conversions show first.
 *
 * Units: cfm at the one basis, mm; share of 1.
 * Source: handbook 3.5 and 8.5.
 *
 * @throws {RangeError} as `smallestOpening`, or when the flow is not above zero
 */
export function smallestOpeningCoefficient(cfm28: number, valve: ValveOnSeat, liftMm: number): number {
  assertPositive('smallestOpeningCoefficient', { flow: cfm28 })
  return effectiveAreaMm2(cfm28) / smallestOpening(valve, liftMm).areaMm2
}
