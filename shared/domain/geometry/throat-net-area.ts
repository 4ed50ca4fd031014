/**
 * Area of the throat less the valve stem.
 *
 * Units: mm; mm2.
 * Source: handbook 3.5.
 *
 * @throws {RangeError} unless the stem is above zero and smaller than the throat
 * @example
 * throatNetArea(33.6, 8) // => 836.4
 */
export function throatNetArea(throatMm: number, stemMm: number): number {
  if (!(stemMm > 0) || !(throatMm > stemMm) || !Number.isFinite(throatMm)) throw new RangeError('throatNetArea requires a stem above zero and smaller than the throat')
  return Math.PI / 4 * (throatMm * throatMm - stemMm * stemMm)
}
