import type { FlowPoint, FlowRun } from './flow-run'
import { pchip } from './pchip'

/** How far one inner point lies from a curve drawn without it. */
export interface CurveResidual {
  liftMm: number
  cfm28: number
  /** What the other points expect here. */
  expectedCfm28: number
  /** Reading less expectation. */
  residualCfm: number
  /** Of the expectation. */
  percent: number
  offCurve: boolean
}

/** Off the curve is more than 2.5 % and more than 2.5 U of the point. Source: handbook 4.4. */
const limit = { percent: 2.5, timesU: 2.5 }

/**
 * Each inner point against the curve through the others.
 *
 * Two curves are drawn by PCHIP, one through flow and one through flow per mm of lift, which changes slowly where flow itself
 * bends sharply but bends where the lift zero is off; the one nearer to the point is used, so a point is off only if both say so.
 * The end points have nothing beyond them and are not judged. A point that is off spoils the curve its neighbours are held against, so the worst
 * one is set aside and the rest are looked at again, until none is off.
 *
 * Units: mm, cfm at the one basis, per cent. Fewer than five points give none.
 * Source: handbook 3.5 and 4.4; limits are school design values.
 */
export function curveResiduals(run: FlowRun): CurveResidual[] {
  const off: CurveResidual[] = []
  let kept = [...run.points]
  for (;;) {
    const residuals = innerResiduals(kept)
    const [worst] = residuals.filter(residual => residual.offCurve).sort((a, b) => Math.abs(b.percent) - Math.abs(a.percent))
    if (!worst) return [...off, ...residuals].sort((a, b) => a.liftMm - b.liftMm)
    off.push(worst)
    kept = kept.filter(point => point.liftMm !== worst.liftMm)
  }
}

function innerResiduals(kept: readonly FlowPoint[]): CurveResidual[] {
  if (kept.length < 5) return []
  return kept.slice(1, -1).map((point) => {
    const others = kept.filter(other => other !== point)
    const lifts = others.map(other => other.liftMm)
    const throughFlow = pchip(lifts, others.map(other => other.cfm28)).at(point.liftMm)
    const throughSlope = point.liftMm * pchip(lifts, others.map(other => other.cfm28 / other.liftMm)).at(point.liftMm)
    const expected = Math.abs(point.cfm28 - throughFlow) < Math.abs(point.cfm28 - throughSlope) ? throughFlow : throughSlope
    const residualCfm = point.cfm28 - expected
    const percent = 100 * residualCfm / expected
    const offCurve = Math.abs(percent) > limit.percent && Math.abs(residualCfm) > limit.timesU * point.expandedUncertainty
    return { liftMm: point.liftMm, cfm28: point.cfm28, expectedCfm28: expected, residualCfm, percent, offCurve }
  })
}
