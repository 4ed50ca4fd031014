import { assertSections, type Section } from './assert-sections'

/** Change of area from one section to the next, along the port. */
export interface AreaChange {
  fromMm: number
  toMm: number
  /** 100 (A2/A1 - 1) / (ds/10). */
  percentPer10Mm: number
  /** Included angle of the cone of the same areas; positive opens. Over about 7 to 10 degrees air may let go of the wall. */
  coneDeg: number
}

/**
 * Area change per 10 mm and the cone it stands for, between neighbouring sections.
 *
 * Units: mm, mm2; per cent per 10 mm, degrees.
 * Source: handbook 3.5 and 8.3: included angle 2 atan((d2 - d1) / 2 ds), d = √(4A/π).
 *
 * @throws {RangeError} with fewer than two sections, stations that do not rise, or an area not above zero
 */
export function areaChanges(sections: readonly Section[]): AreaChange[] {
  assertSections('areaChanges', sections, 2)
  return sections.slice(1).map((section, index) => {
    const before = sections[index] as Section
    const step = section.stationMm - before.stationMm
    const diameter = (areaMm2: number): number => Math.sqrt(4 * areaMm2 / Math.PI)
    return {
      fromMm: before.stationMm,
      toMm: section.stationMm,
      percentPer10Mm: 100 * (section.areaMm2 / before.areaMm2 - 1) / (step / 10),
      coneDeg: 2 * Math.atan((diameter(section.areaMm2) - diameter(before.areaMm2)) / (2 * step)) * 180 / Math.PI,
    }
  })
}
