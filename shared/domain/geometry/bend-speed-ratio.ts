/**
 * Speed at the inside wall of a bend over the mean, as of a free vortex: h / (ri ln((ri + h) / ri)).
 *
 * Units: mm; a ratio.
 * Source: handbook 8.14.
 *
 * @throws {RangeError} unless both lengths are above zero
 * @example
 * bendSpeedRatio(26, 6) // => 2.59
 */
export function bendSpeedRatio(heightMm: number, innerRadiusMm: number): number {
  if (!(heightMm > 0) || !(innerRadiusMm > 0) || !Number.isFinite(heightMm) || !Number.isFinite(innerRadiusMm)) throw new RangeError('bendSpeedRatio requires lengths above zero')
  return heightMm / (innerRadiusMm * Math.log((innerRadiusMm + heightMm) / innerRadiusMm))
}
