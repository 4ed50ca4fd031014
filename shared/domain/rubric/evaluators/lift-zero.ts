import { liftZero as zeroOfRun } from '../../airflow/lift-zero'
import type { Evaluator } from '../evidence'
import { runOf, valveHeadMm } from '../flow-evidence'
import { liftInWords, listInWords } from '../words'
import { flowValue, noSheet } from './flow-value'

/** Where the line through the two lowest lifts meets no flow. */
export const liftZero: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  if (now.run.missing.length > 0) return { notAssessed: `A lift is missing from the sheet: ${listInWords(now.run.missing.map(one => liftInWords(one.liftMm)))}.` }
  const zero = zeroOfRun(now.run, valveHeadMm(evidence, now.sheet.header, unit.side ?? 'intake'))
  const [lowest] = now.run.points
  if (!zero || !lowest) return { notAssessed: 'The two lowest lifts are not low enough, or do not rise, so nothing can be said of the lift zero.' }
  return {
    values: [flowValue({ value: zero.liftMm, unit: 'mm', trace: zero.trace })],
    fill: () => ({ share: (100 * Math.abs(zero.liftMm) / lowest.liftMm).toFixed(0) }),
  }
}
