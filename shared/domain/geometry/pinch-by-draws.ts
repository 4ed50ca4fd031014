import { type Pinch, pinch } from './pinch'
import { assertSections, type Section } from './assert-sections'

/**
 * Doubt of the pinch by drawing: every section from a normal about its reading, the pinch of each draw, the spread of the draws.
 *
 * `normal` gives standard normal draws; it is passed in so that a draw can be repeated.
 *
 * Units: mm, mm2; u of each.
 * Source: handbook 8.1.
 *
 * @throws {RangeError} as `pinch`, or on draws outside 10 to 10,000
 */
export function pinchByDraws(sections: readonly Section[], normal: () => number, draws = 1000, share = 0.01): Pick<Pinch, 'stationUncertainty' | 'areaUncertainty'> {
  assertSections('pinchByDraws', sections, 3)
  if (!Number.isInteger(draws) || draws < 10 || draws > 10_000) throw new RangeError('pinchByDraws requires 10 to 10,000 draws')
  const found = Array.from({ length: draws }, () =>
    pinch(sections.map(({ stationMm, areaMm2 }) => ({ stationMm, areaMm2: areaMm2 * (1 + share * normal()) })), share))
  return { stationUncertainty: spread(found.map(one => one.stationMm)), areaUncertainty: spread(found.map(one => one.areaMm2)) }
}

function spread(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1))
}
