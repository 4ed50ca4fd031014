import { curveResiduals } from '../../airflow/curve-residuals'
import { digitExchange } from '../../airflow/digit-exchange'
import type { Evaluator } from '../evidence'
import { runOf } from '../flow-evidence'
import { liftInWords } from '../words'
import { flowValue, noSheet } from './flow-value'

/** The inner point furthest from the curve through the others. */
export const curveResidual: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const residuals = curveResiduals(now.run)
  const [worst] = [...residuals].sort((a, b) => Math.abs(b.percent) - Math.abs(a.percent))
  if (!worst) return { notAssessed: 'Fewer than five lifts have no curve to lie off.' }
  const exchanged = worst.offCurve ? digitExchange(worst.cfm28.toFixed(1), worst.expectedCfm28, now.run.points.find(point => point.liftMm === worst.liftMm)?.expandedUncertainty ?? 0) : null
  return {
    values: [flowValue({ value: Math.abs(worst.percent), unit: '%', liftMm: worst.liftMm, at: liftInWords(worst.liftMm), trace: residuals.map(one => ({
      what: `off the curve at ${liftInWords(one.liftMm)}`, sum: `${one.cfm28.toFixed(2)} - ${one.expectedCfm28.toFixed(2)} cfm`, gives: `${one.percent.toFixed(1)} %`,
    })) })],
    ...(exchanged === null ? {} : { finding: 'Digits' }),
  }
}
