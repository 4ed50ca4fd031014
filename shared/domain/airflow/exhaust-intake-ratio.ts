import type { FlowRun } from './flow-run'
import { flowAtLift } from './flow-at-lift'
import { liftWeightedFlow } from './lift-weighted-flow'

/** Exhaust flow as a percentage of intake flow. */
export interface ExhaustIntakeRatio {
  perLift: { liftMm: number, percent: number, expandedUncertainty: number }[]
  /** Over the card's lift curve; null where either sheet is too short. */
  weighted: { percent: number, expandedUncertainty: number } | null
}

/**
 * Exhaust over intake of one cylinder, at each exhaust lift the intake run can answer for, and weighted by the lift curve.
 *
 * Units: mm, per cent; U is k = 2.
 * Source: handbook 3.5.
 *
 * @throws {RangeError} as `flowAtLift` and `liftWeightedFlow`
 */
export function exhaustIntakeRatio(exhaust: FlowRun, intake: FlowRun, maxLiftMm: number): ExhaustIntakeRatio {
  const perLift = exhaust.points.flatMap((point) => {
    const other = flowAtLift(intake, point.liftMm)
    return other === null ? [] : [{ liftMm: point.liftMm, ...ratio(point, other) }]
  })
  const top = liftWeightedFlow(exhaust, maxLiftMm)
  const bottom = liftWeightedFlow(intake, maxLiftMm)
  return { perLift, weighted: top && bottom ? ratio(top, bottom) : null }
}

interface Doubted { cfm28: number, expandedUncertainty: number }

function ratio(top: Doubted, bottom: Doubted): { percent: number, expandedUncertainty: number } {
  const percent = 100 * top.cfm28 / bottom.cfm28
  return { percent, expandedUncertainty: percent * Math.hypot(top.expandedUncertainty / top.cfm28, bottom.expandedUncertainty / bottom.cfm28) }
}
