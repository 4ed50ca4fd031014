import { assertPositive } from './assert-positive'

/**
 * Ideal (isentropic) mass flow over that of A √(2 ρ1 Δp), which takes the air as incompressible at its upstream density.
 *
 * ε = √(γ/(γ-1) · r^(2/γ) · (1 - r^((γ-1)/γ)) / (1 - r)), r = 1 - Δp/p1. For scaling a flow from one test pressure to another
 * the ratio of two of these is how far the square root is out: 2.5 % from 10 to 28 inH2O for an ideal nozzle.
 *
 * Units: Pa absolute upstream, Pa difference; share of 1.
 * Source: Heywood, appendix C (from memory).
 *
 * @throws {RangeError} unless the flow is subsonic: the downstream pressure above the critical one
 * @example
 * isentropicExpansionFactor(101325, 6974.48948) // => 0.96242
 */
export function isentropicExpansionFactor(upstreamPa: number, differencePa: number, gamma = 1.4): number {
  assertPositive('isentropicExpansionFactor', { 'upstream pressure': upstreamPa, 'pressure difference': differencePa })
  const r = 1 - differencePa / upstreamPa
  if (!(gamma > 1) || !(r >= criticalPressureRatio(gamma))) throw new RangeError('isentropicExpansionFactor requires subsonic flow')
  return Math.sqrt(gamma / (gamma - 1) * r ** (2 / gamma) * (1 - r ** ((gamma - 1) / gamma)) / (1 - r))
}

/** Downstream over upstream pressure at which the jet reaches the speed of sound: (2/(γ+1))^(γ/(γ-1)). */
export function criticalPressureRatio(gamma: number): number {
  return (2 / (gamma + 1)) ** (gamma / (gamma - 1))
}
