import type { Evaluator } from '../evidence'
import { runOf } from '../flow-evidence'
import { liftInWords } from '../words'
import { flowValue, noSheet } from './flow-value'

/** How much of the bench's range the run used. */
export const benchRangeUsed: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const read = now.run.points.flatMap(point => point.rangeShare === undefined || point.rangeShare === null ? [] : [{ liftMm: point.liftMm, share: point.rangeShare }])
  const [most] = [...read].sort((a, b) => b.share - a.share)
  if (most) return { values: [flowValue({ value: 100 * most.share, unit: '%', liftMm: most.liftMm, trace: [{ what: 'greatest share of a range', sum: `at ${liftInWords(most.liftMm)}`, gives: `${(100 * most.share).toFixed(0)} %` }] })] }
  return { notAssessed: 'The sheet has no column that says how much of the range was used.' }
}
