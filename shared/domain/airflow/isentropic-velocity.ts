import { assertPositive } from './assert-positive'

/**
 * Speed of a loss-free jet of a perfect gas from rest, expansion counted: √(2γ/(γ-1) R T (1 - r^((γ-1)/γ))), r = 1 - Δp/p1.
 *
 * Units: Pa absolute upstream, Pa difference, kelvin, J/(kg K); m/s.
 * Source: Heywood, Internal Combustion Engine Fundamentals, 1st ed., appendix C (from memory).
 *
 * @throws {RangeError} unless the difference lies between nothing and the upstream pressure
 */
export function isentropicVelocity(upstreamPa: number, differencePa: number, kelvin: number, gasConstant = 287.05, gamma = 1.4): number {
  assertPositive('isentropicVelocity', { 'upstream pressure': upstreamPa, 'pressure difference': differencePa, 'temperature': kelvin, 'gas constant': gasConstant })
  if (!(gamma > 1) || !(differencePa < upstreamPa)) throw new RangeError('isentropicVelocity requires gamma above one and a difference below the upstream pressure')
  const r = 1 - differencePa / upstreamPa
  return Math.sqrt(2 * gamma / (gamma - 1) * gasConstant * kelvin * (1 - r ** ((gamma - 1) / gamma)))
}
