import { assertPositive } from './assert-positive'

/** A valve on its seat, as the smallest opening needs it. Lengths mm. */
export interface ValveOnSeat {
  /** Outer diameter of the seat face. */
  seatOuterMm: number
  stemMm: number
  /** Width of the seat in the radial direction: the land along the face times the cosine of the seat angle. */
  seatWidthMm: number
  /** Angle of the seat face from the deck plane, degrees. */
  seatDeg: number
  /** Measured throat; caps the opening. Left out, the inner seat diameter alone does. */
  throatMm?: number | null
}

/** Which gap is the smallest. */
export interface SmallestOpening { areaMm2: number, regime: 'cone' | 'slant' | 'throat' }

/**
 * The least geometric area the air must pass at a lift: near the seat a cone square to its face, then the slanted gap between
 * the two seat edges, then the bore less the stem; never more than the measured throat less the stem.
 *
 * Units: mm, degrees; mm2.
 * Source: Heywood, Internal Combustion Engine Fundamentals, 1st ed., 6.3, equations (6.7) to (6.9) (from memory; both joins checked).
 *
 * @throws {RangeError} on lengths that are not above zero, an angle outside 15 to 60 degrees, a seat wider than the valve or a stem that fills the bore
 * @example
 * smallestOpening({ seatOuterMm: 40, stemMm: 6, seatWidthMm: 1.5, seatDeg: 45 }, 5).areaMm2 // => 460.57
 */
export function smallestOpening(valve: ValveOnSeat, liftMm: number): SmallestOpening {
  const { seatOuterMm: outer, stemMm: stem, seatWidthMm: w, throatMm } = valve
  assertPositive('smallestOpening', { 'seat diameter': outer, 'stem': stem, 'seat width': w, 'lift': liftMm })
  if (!(valve.seatDeg >= 15 && valve.seatDeg <= 60)) throw new RangeError('smallestOpening requires a seat angle between 15 and 60 degrees')
  const mean = outer - w
  const inner = outer - 2 * w
  if (!(inner > stem)) throw new RangeError('smallestOpening requires a seat bore larger than the stem')
  if (throatMm !== undefined && throatMm !== null && !(throatMm > stem)) throw new RangeError('smallestOpening requires a throat larger than the stem')

  const b = valve.seatDeg * Math.PI / 180
  const bore = Math.PI / 4 * (inner * inner - stem * stem)
  const cap = throatMm === undefined || throatMm === null ? bore : Math.min(bore, Math.PI / 4 * (throatMm * throatMm - stem * stem))
  const across = (inner * inner - stem * stem) / (4 * mean)
  // With a very wide seat on a thick stem the bore is the least from the start of the second range.
  const slantEndsMm = w * Math.tan(b) + Math.sqrt(Math.max(0, across * across - w * w))

  const gap = liftMm <= w / (Math.sin(b) * Math.cos(b))
    ? { areaMm2: Math.PI * liftMm * Math.cos(b) * (inner + liftMm / 2 * Math.sin(2 * b)), regime: 'cone' as const }
    : liftMm <= slantEndsMm
      ? { areaMm2: Math.PI * mean * Math.hypot(liftMm - w * Math.tan(b), w), regime: 'slant' as const }
      : { areaMm2: bore, regime: 'throat' as const }
  return gap.areaMm2 < cap ? gap : { areaMm2: cap, regime: 'throat' }
}
