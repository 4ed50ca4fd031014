import { assertPositive } from './assert-positive'
import { idealVelocity } from './ideal-velocity'
import { referenceBasis } from './reference-basis'

/**
 * Discharge coefficient on the curtain: flow over π D L v, at the one basis. What people quote.
 *
 * Units: cfm at 28 inH2O and 1.2041 kg/m3, mm, mm; share of 1.
 * Source: handbook 3.5.
 *
 * @throws {RangeError} unless all are above zero
 * @example
 * curtainCoefficient(22.38, 40.9956, 1.27) // => 0.600
 */
export function curtainCoefficient(cfm28: number, valveMm: number, liftMm: number): number {
  assertPositive('curtainCoefficient', { flow: cfm28, valve: valveMm, lift: liftMm })
  return effectiveAreaMm2(cfm28) / (Math.PI * valveMm * liftMm)
}

/**
 * Area of a perfect hole that would pass this flow, at the one basis.
 *
 * Units: cfm at the one basis; mm2.
 */
export function effectiveAreaMm2(cfm28: number): number {
  return cfm28 * 4.719474432e-4 / idealVelocity(referenceBasis.pressurePa, referenceBasis.densityKgPerM3) * 1e6
}
