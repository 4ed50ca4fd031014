import { exhaustIntakeRatio as ratioOfRuns } from '../../airflow/exhaust-intake-ratio'
import type { Evaluator } from '../evidence'
import { runOf } from '../flow-evidence'
import { liftInWords } from '../words'
import { flowValue } from './flow-value'

/** Exhaust flow as a percentage of intake flow, weighted by the card's lift curve, one cylinder. */
export const exhaustIntakeRatio: Evaluator = (evidence, _criterion, unit) => {
  const [exhaust, intake] = (['exhaust', 'intake'] as const).map(side => runOf(evidence, evidence.op, { cylinder: unit.cylinder, side }))
  if (!exhaust || !intake) return { notAssessed: `It takes a sheet of this stage for both sides of ${unit.cylinder === null ? 'one cylinder' : `cylinder ${unit.cylinder}`}.` }
  if (exhaust.run.points.length < 3 || intake.run.points.length < 3) return { notAssessed: 'A weighted ratio needs at least three lifts on both sheets.' }
  const ratio = ratioOfRuns(exhaust.run, intake.run, evidence.casting.lift_curve.max_lift)
  if (!ratio.weighted) return { notAssessed: `A sheet stops short of the card's greatest lift, ${liftInWords(evidence.casting.lift_curve.max_lift)}.` }
  return {
    values: [flowValue({ value: ratio.weighted.percent, unit: '%', u: ratio.weighted.expandedUncertainty / 2, trace: [
      ...ratio.perLift.map(one => ({ what: `exhaust over intake at ${liftInWords(one.liftMm)}`, sum: 'at the same lift', gives: `${one.percent.toFixed(1)} %` })),
      { what: 'weighted by the lift curve', sum: 'mean flow over the open angle, exhaust over intake', gives: `${ratio.weighted.percent.toFixed(1)} %` },
    ] })],
  }
}
