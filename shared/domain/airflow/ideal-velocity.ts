import { assertPositive } from './assert-positive'

/**
 * Speed of a loss-free jet under a pressure difference, air taken as incompressible: √(2 Δp / ρ).
 *
 * The trade's convention for coefficients; at 28 inH2O it overstates the ideal *mass* flow by 3.9 %, so coefficients from it are
 * for comparing with each other. `isentropicVelocity` has no such error.
 *
 * Units: Pa, kg/m3; m/s.
 * Source: Bernoulli; handbook 3.5 and 8.
 *
 * @throws {RangeError} unless both are above zero
 * @example
 * idealVelocity(6974.489, 1.2041) // => 107.63
 */
export function idealVelocity(pressurePa: number, densityKgPerM3: number): number {
  assertPositive('idealVelocity', { pressure: pressurePa, density: densityKgPerM3 })
  return Math.sqrt(2 * pressurePa / densityKgPerM3)
}
