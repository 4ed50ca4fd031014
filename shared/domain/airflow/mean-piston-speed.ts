import { assertPositive } from './assert-positive'

/**
 * Mean speed of the piston: 2 x stroke x revolutions a second.
 *
 * Units: m, revolutions a minute; m/s.
 * Source: definition.
 *
 * @throws {RangeError} unless both are above zero
 * @example
 * meanPistonSpeed(0.08, 6000) // => 16
 */
export function meanPistonSpeed(strokeM: number, revolutionsPerMinute: number): number {
  assertPositive('meanPistonSpeed', { 'stroke': strokeM, 'engine speed': revolutionsPerMinute })
  return 2 * strokeM * revolutionsPerMinute / 60
}
