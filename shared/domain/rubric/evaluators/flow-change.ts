import { changePerLift } from '../../airflow/change-per-lift'
import { flowLossVerdict } from '../../airflow/flow-loss-verdict'
import type { Evaluator } from '../evidence'
import { liftInWords, listInWords } from '../words'
import { nowAndBefore, perLiftTrace } from './now-and-before'

/**
 * "No lift may lose": every lift against the baseline, with the rule that allows for nine chances to be unlucky.
 *
 * The value is the change that is furthest down in its own doubt.
 *
 * Source: handbook 3.2.
 */
export const flowChange: Evaluator = (evidence, _criterion, unit) => {
  const runs = nowAndBefore(evidence, unit)
  if ('notAssessed' in runs) return runs
  const changes = changePerLift(runs.now.run, runs.before.run)
  const [worst] = [...changes].sort((a, b) => a.changeCfm / a.expandedUncertainty - b.changeCfm / b.expandedUncertainty)
  if (!worst) return { notAssessed: 'The two sheets have no lift in common.' }
  const verdict = flowLossVerdict(changes)
  const gained = changes.filter(change => change.verdict === 'gain').length
  return {
    values: [{ value: worst.changeCfm, unit: 'cfm', standardUncertainty: worst.expandedUncertainty / 2, degreesOfFreedom: null, at: null, liftMm: worst.liftMm, trace: perLiftTrace(changes) }],
    verdict: verdict.state,
    ...(verdict.atLowLifts ? { finding: 'LowLifts' } : {}),
    fill: (): Record<string, string> => ({ lifts: listInWords(verdict.liftsMm.map(liftInWords)), n: String(gained), m: String(changes.length) }),
  }
}
