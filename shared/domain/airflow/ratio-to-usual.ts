import { pchip } from './pchip'
import type { FlowRun } from './flow-run'

/** A casting's usual flow at a stage, at the one basis. */
export interface UsualCurve { liftMm: readonly number[], cfm28: readonly number[] }

/** A run against the casting's usual curve. */
export interface RatioToUsual {
  /** Mean over the lifts compared. */
  mean: number
  /** Standard deviation of the ratio from lift to lift, per cent of the mean. */
  spreadPercent: number
  perLift: { liftMm: number, ratio: number }[]
  /** A pressure benches use that would explain a ratio that is the same everywhere; null when none does. */
  pressure: { usedInH2O: number, ratioExpected: number } | null
}

/** Test pressures in use, inH2O; 2.5 kPa is 10.04 and cannot be told from 10. Source: handbook 4.2. */
const usedPressures = [5, 10, 15, 20, 25, 28]

/**
 * Ratio of a run to the usual curve at every lift both have; null with fewer than four.
 *
 * A ratio the same at every lift (spread under 2 %) and within 0.02 of √(used / stated) says that the pressure written is not the
 * pressure used: a fault of the port never scales every lift alike. `statedPa` is the pressure the sheet was brought to 28 from.
 *
 * Units: mm, cfm at the one basis, Pa.
 * Source: handbook 4.4.
 *
 * @throws {RangeError} when the usual curve is not a curve, or the stated pressure is not above zero
 */
export function ratioToUsual(run: FlowRun, usual: UsualCurve, statedPa: number): RatioToUsual | null {
  if (!(statedPa > 0)) throw new RangeError('ratioToUsual requires a stated pressure above zero')
  const curve = pchip([0, ...usual.liftMm], [0, ...usual.cfm28])
  const lowest = usual.liftMm[0] as number
  const highest = usual.liftMm[usual.liftMm.length - 1] as number
  const perLift = run.points
    .filter(point => point.liftMm >= lowest / 2 && point.liftMm <= highest + 0.02)
    .map(point => ({ liftMm: point.liftMm, ratio: point.cfm28 / curve.at(Math.min(point.liftMm, highest)) }))
  if (perLift.length < 4) return null
  const mean = perLift.reduce((sum, { ratio }) => sum + ratio, 0) / perLift.length
  const squares = perLift.reduce((sum, { ratio }) => sum + (ratio - mean) ** 2, 0)
  const spreadPercent = 100 * Math.sqrt(squares / (perLift.length - 1)) / mean

  const stated = statedPa / 249.08891
  const [closest] = spreadPercent < 2 && Math.abs(mean - 1) > 0.06
    ? usedPressures
        .map(used => ({ usedInH2O: used, ratioExpected: Math.sqrt(used / stated) }))
        .filter(({ ratioExpected }) => Math.abs(ratioExpected - mean) <= 0.02 && Math.abs(ratioExpected - 1) > 0.04)
        .sort((a, b) => Math.abs(a.ratioExpected - mean) - Math.abs(b.ratioExpected - mean))
    : []
  return { mean, spreadPercent, perLift, pressure: closest ?? null }
}
