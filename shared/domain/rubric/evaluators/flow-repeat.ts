import { flowRepeatability } from '../../airflow/flow-repeatability'
import type { Evaluator } from '../evidence'
import { runsOf } from '../flow-evidence'
import { unitInWords } from '../words'
import { flowValue, noSheet } from './flow-value'

/** Scatter of the runs of one port, each from a fresh set-up, pooled over the lifts. Source: handbook 3.5. */
export const flowRepeat: Evaluator = (evidence, criterion, unit) => {
  const wanted = criterion.wants.find(want => want.kind === 'flow-sheet')?.count ?? 3
  const runs = runsOf(evidence, evidence.op, unit).flatMap(({ run }) => run.repeats === undefined ? [run] : run.repeats.map(points => ({ ...run, points })))
  if (runs.length === 0) return noSheet(unit)
  if (runs.length < wanted) return { notAssessed: `${runs.length} of ${wanted} runs of ${unitInWords(unit)}, each from a fresh set-up.` }
  const repeat = flowRepeatability(runs)
  if (!repeat) return { notAssessed: 'The runs have no lift in common.' }
  return {
    values: [flowValue({ value: repeat.percent, unit: '%', trace: [
      { what: 'each reading as a percentage of the mean at its lift', sum: `${runs.length} runs`, gives: `${repeat.degreesOfFreedom} degrees of freedom` },
      { what: 'pooled standard deviation', sum: 'sqrt(sum (n - 1) s^2 / sum (n - 1))', gives: `${repeat.percent.toFixed(2)} %` },
      { what: 'repeat limit', sum: `2.8 x ${repeat.percent.toFixed(2)}`, gives: `${repeat.limitPercent.toFixed(1)} %` },
    ] })],
    fill: () => ({ limit: repeat.limitPercent.toFixed(1) }),
  }
}
