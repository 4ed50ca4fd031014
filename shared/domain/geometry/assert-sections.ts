/** A section of a port: distance along the centre line and area. */
export interface Section { stationMm: number, areaMm2: number }

/**
 * Stops a section schedule that no port has before it is computed with.
 *
 * @throws {RangeError} with fewer than `least` sections, stations that do not rise, or an area not above zero
 */
export function assertSections(caller: string, sections: readonly Section[], least: number): void {
  if (sections.length < least) throw new RangeError(`${caller} requires at least ${least} sections`)
  sections.forEach(({ stationMm, areaMm2 }, index) => {
    if (!Number.isFinite(stationMm) || !(areaMm2 > 0) || !Number.isFinite(areaMm2)) throw new RangeError(`${caller} requires finite stations and areas above zero`)
    const before = sections[index - 1]
    if (before && !(stationMm > before.stationMm)) throw new RangeError(`${caller} requires stations that rise`)
  })
}
