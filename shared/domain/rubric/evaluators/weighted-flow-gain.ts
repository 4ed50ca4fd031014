import { liftWeightedFlow } from '../../airflow/lift-weighted-flow'
import type { Evaluator } from '../evidence'
import { liftInWords } from '../words'
import { nowAndBefore } from './now-and-before'

/** Gain of the lift-weighted flow over the baseline, per cent. Source: handbook 3.5 and 8.6. */
export const weightedFlowGain: Evaluator = (evidence, _criterion, unit) => {
  const runs = nowAndBefore(evidence, unit)
  if ('notAssessed' in runs) return runs
  const top = evidence.casting.lift_curve.max_lift
  if (runs.now.run.points.length < 3 || runs.before.run.points.length < 3) return { notAssessed: 'A weighted flow needs at least three lifts on both sheets.' }
  const [now, before] = [liftWeightedFlow(runs.now.run, top), liftWeightedFlow(runs.before.run, top)]
  if (!now || !before) return { notAssessed: `A sheet stops short of the card's greatest lift, ${liftInWords(top)}.` }
  const value = 100 * (now.cfm28 / before.cfm28 - 1)
  return {
    values: [{
      value, unit: '%', degreesOfFreedom: null, at: null, liftMm: null,
      standardUncertainty: 50 * (now.cfm28 / before.cfm28) * Math.hypot(now.expandedUncertainty / now.cfm28, before.expandedUncertainty / before.cfm28),
      trace: [...now.trace, { what: 'lift-weighted flow now over baseline', sum: `100 x (${now.cfm28.toFixed(2)} / ${before.cfm28.toFixed(2)} - 1)`, gives: `${value.toFixed(1)} %` }],
    }],
  }
}
