/**
 * Diameter of the seat's inner edge from the outer one and the land, which is measured along the seat face.
 *
 * D_in = D_seat - 2 land cos(seat angle).
 *
 * Units: mm, degrees; mm.
 * Source: handbook 3.5.
 *
 * @throws {RangeError} on a length not above zero, an angle outside 0 to 90, or a land wider than the seat
 * @example
 * landInnerDiameter(40.5, 1.65, 45) // => 38.17
 */
export function landInnerDiameter(seatOuterMm: number, landMm: number, seatDeg: number): number {
  if (!(seatOuterMm > 0) || !(landMm > 0) || !Number.isFinite(seatOuterMm) || !Number.isFinite(landMm)) throw new RangeError('landInnerDiameter requires lengths above zero')
  if (!(seatDeg > 0 && seatDeg < 90)) throw new RangeError('landInnerDiameter requires a seat angle between 0 and 90 degrees')
  const inner = seatOuterMm - 2 * landMm * Math.cos(seatDeg * Math.PI / 180)
  if (!(inner > 0)) throw new RangeError('landInnerDiameter requires a land narrower than the seat')
  return inner
}
