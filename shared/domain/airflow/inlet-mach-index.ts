import { assertPositive } from './assert-positive'

/** What the index is made of. */
export interface MachIndexInputs {
  boreMm: number
  meanPistonSpeedMPerS: number
  /** Effective area averaged over the valve-open angle, all inlet valves of the cylinder together. */
  meanEffectiveAreaMm2: number
  soundSpeedMPerS: number
}

/**
 * Inlet Mach index: Z = Cp Ap / (a Ae). An index, not horsepower: above about 0.5 filling is known to fall steeply.
 *
 * Units: mm, m/s, mm2; a ratio.
 * Source: handbook 8.16, after Taylor (from memory).
 *
 * @throws {RangeError} unless all are above zero
 * @example
 * inletMachIndex({ boreMm: 100, meanPistonSpeedMPerS: 16, meanEffectiveAreaMm2: 0.35 * Math.PI / 4 * 50 ** 2, soundSpeedMPerS: 340 }) // => 0.538
 */
export function inletMachIndex({ boreMm, meanPistonSpeedMPerS, meanEffectiveAreaMm2, soundSpeedMPerS }: MachIndexInputs): number {
  assertPositive('inletMachIndex', { 'bore': boreMm, 'piston speed': meanPistonSpeedMPerS, 'effective area': meanEffectiveAreaMm2, 'speed of sound': soundSpeedMPerS })
  return meanPistonSpeedMPerS * Math.PI / 4 * boreMm * boreMm / (soundSpeedMPerS * meanEffectiveAreaMm2)
}
