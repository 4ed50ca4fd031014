import { assertSections, type Section } from './assert-sections'

/**
 * Volume of a port from its sections, by the trapezium rule.
 *
 * Units: mm, mm2; cc.
 * Source: handbook 8.17.
 *
 * @throws {RangeError} with fewer than two sections, stations that do not rise, or an area not above zero
 * @example
 * sectionVolume([{ stationMm: 0, areaMm2: 1000 }, { stationMm: 10, areaMm2: 1000 }]) // => 10
 */
export function sectionVolume(sections: readonly Section[]): number {
  assertSections('sectionVolume', sections, 2)
  const mm3 = sections.slice(1).reduce((sum, section, index) => {
    const before = sections[index] as Section
    return sum + (section.stationMm - before.stationMm) * (section.areaMm2 + before.areaMm2) / 2
  }, 0)
  return mm3 / 1000
}
