import { leakCheck } from '../../airflow/leak-check'
import type { Evaluator } from '../evidence'
import { runOf } from '../flow-evidence'
import { flowValue, noSheet } from './flow-value'

/** Flow with the valve shut, at the one basis. */
export const leak: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const { leakCfm28 } = now.sheet.header
  const [lowest] = now.run.points
  if (leakCfm28 === null || !lowest) return { notAssessed: 'The sheet has no row with the valve shut.' }
  const check = leakCheck(leakCfm28, lowest.cfm28)
  return {
    values: [flowValue({ value: leakCfm28, unit: 'cfm', trace: [{ what: 'flow with the valve shut, at 28 inH2O', sum: 'as read', gives: `${leakCfm28.toFixed(2)} cfm, ${check.shareOfLowestPercent.toFixed(0)} % of the lowest lift` }] })],
    fill: () => ({ share: check.shareOfLowestPercent.toFixed(0) }),
  }
}
