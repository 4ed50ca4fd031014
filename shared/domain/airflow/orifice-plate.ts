import { assertPositive } from './assert-positive'

/** Where the two pressures of an orifice plate are taken. */
export type Taps = 'corner' | 'flange' | 'D and D/2'

/** A plate in its pipe. */
export interface OrificePlate {
  /** Pipe bore. */
  pipeM: number
  boreM: number
  taps: Taps
}

/** What flows through it. */
export interface OrificeFlow {
  differencePa: number
  upstreamPa: number
  densityKgPerM3: number
  viscosityPaS: number
  /** Isentropic exponent; 1.4 for air. */
  kappa?: number
  /** A liquid does not expand. */
  incompressible?: boolean
}

/**
 * Discharge coefficient of an orifice plate (Reader-Harris and Gallagher).
 *
 * Units: m; Reynolds number on the pipe bore.
 * Source: ISO 5167-2, equation (4), seen as quoted by other programs' tests; its last term applies only to pipes under 71.12 mm
 * and is 0.011, not the 0.11 some notes print.
 *
 * @throws {RangeError} unless the bore is smaller than the pipe and the Reynolds number above zero
 */
export function orificeDischargeCoefficient({ pipeM, boreM, taps }: OrificePlate, pipeReynolds: number): number {
  assertPositive('orificeDischargeCoefficient', { 'pipe bore': pipeM, 'plate bore': boreM, 'Reynolds number': pipeReynolds })
  const beta = boreM / pipeM
  if (!(beta < 1)) throw new RangeError('orificeDischargeCoefficient requires a plate bore smaller than the pipe')
  const pipeMm = pipeM * 1000
  const [l1, l2] = taps === 'corner' ? [0, 0] : taps === 'flange' ? [25.4 / pipeMm, 25.4 / pipeMm] : [1, 0.47]
  const a = (19_000 * beta / pipeReynolds) ** 0.8
  const m2 = 2 * l2 / (1 - beta)
  const b4 = beta ** 4
  const small = pipeMm < 71.12 ? 0.011 * (0.75 - beta) * (2.8 - pipeMm / 25.4) : 0
  return 0.5961 + 0.0261 * beta ** 2 - 0.216 * beta ** 8
    + 0.000521 * (1e6 * beta / pipeReynolds) ** 0.7
    + (0.0188 + 0.0063 * a) * beta ** 3.5 * (1e6 / pipeReynolds) ** 0.3
    + (0.043 + 0.080 * Math.exp(-10 * l1) - 0.123 * Math.exp(-7 * l1)) * (1 - 0.11 * a) * b4 / (1 - b4)
    - 0.031 * (m2 - 0.8 * m2 ** 1.1) * beta ** 1.3
    + small
}

/**
 * Expansibility of a gas at an orifice plate: 1 - (0.351 + 0.256 β⁴ + 0.93 β⁸)(1 - (p2/p1)^(1/κ)).
 *
 * Source: ISO 5167-2, equation (5), as quoted by other programs' tests.
 *
 * @throws {RangeError} unless β is below one and the pressures fall
 */
export function orificeExpansibility(beta: number, pressureRatio: number, kappa = 1.4): number {
  if (!(beta >= 0 && beta < 1)) throw new RangeError('orificeExpansibility requires beta between 0 and 1')
  if (!(pressureRatio > 0 && pressureRatio <= 1) || !(kappa > 1)) throw new RangeError('orificeExpansibility requires a falling pressure and kappa above one')
  return 1 - (0.351 + 0.256 * beta ** 4 + 0.93 * beta ** 8) * (1 - pressureRatio ** (1 / kappa))
}

/**
 * Mass flow through an orifice plate, its coefficient found together with the Reynolds number it depends on.
 *
 * qm = C / √(1-β⁴) · ε · π/4 d² · √(2 Δp ρ1).
 *
 * Units: SI; kg/s.
 * Source: ISO 5167-1, equation (1), and ISO 5167-2.
 *
 * @throws {RangeError} as the two functions above
 */
export function orificeMassFlow(plate: OrificePlate, flow: OrificeFlow): number {
  assertPositive('orificeMassFlow', { 'pressure difference': flow.differencePa, 'upstream pressure': flow.upstreamPa, 'density': flow.densityKgPerM3, 'viscosity': flow.viscosityPaS })
  const beta = plate.boreM / plate.pipeM
  const epsilon = flow.incompressible ? 1 : orificeExpansibility(beta, 1 - flow.differencePa / flow.upstreamPa, flow.kappa)
  const perCoefficient = epsilon / Math.sqrt(1 - beta ** 4) * Math.PI / 4 * plate.boreM ** 2 * Math.sqrt(2 * flow.differencePa * flow.densityKgPerM3)
  let massFlow = 0.6 * perCoefficient
  // C hardly moves with the Reynolds number, so plain substitution settles in a few rounds.
  for (let round = 0; round < 50; round++) {
    const reynolds = 4 * massFlow / (Math.PI * plate.pipeM * flow.viscosityPaS)
    const next = orificeDischargeCoefficient(plate, reynolds) * perCoefficient
    if (Math.abs(next - massFlow) <= 1e-14 * next) return next
    massFlow = next
  }
  return massFlow
}
