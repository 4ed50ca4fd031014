import { pressureSteadiness } from '../../airflow/pressure-steadiness'
import { ratioToUsual } from '../../airflow/ratio-to-usual'
import { referenceBasis } from '../../airflow/reference-basis'
import type { Evaluator } from '../evidence'
import { runOf, usualStage } from '../flow-evidence'
import { liftInWords, listInWords } from '../words'
import { flowValue, noSheet } from './flow-value'

/** Drift of the test pressure over the run, and whether the pressure written is the pressure used. */
export const testPressureDrift: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const side = unit.side ?? 'intake'
  const saidPa = now.sheet.header.pressurePa ?? now.run.points[0]?.pressurePa ?? null
  const usual = evidence.casting.usual_flow
  const compared = saidPa === null ? null : ratioToUsual(now.run, { liftMm: usual.lift_mm, cfm28: usual[side][usualStage(evidence.op)] }, saidPa)
  const steady = pressureSteadiness(now.run)
  if (compared?.pressure && saidPa !== null) {
    const { pressure, mean } = compared
    const drift = steady?.driftPercent ?? 0
    return {
      values: [flowValue({ value: drift, unit: '%', trace: [{ what: 'ratio to the usual curve of this casting and stage, every lift', sum: `mean of ${compared.perLift.length} lifts, spread ${compared.spreadPercent.toFixed(1)} %`, gives: `${mean.toFixed(3)}; sqrt(${pressure.usedInH2O} / ${(saidPa / inchOfWater).toFixed(1)}) is ${pressure.ratioExpected.toFixed(3)}` }] })],
      verdict: 'reject',
      finding: 'Ratio',
      fill: () => ({ ratio: mean.toFixed(2), p_used: `${pressure.usedInH2O} inH2O`, p_said: `${(saidPa / inchOfWater).toFixed(1)} inH2O` }),
    }
  }
  if (!steady) return { notAssessed: 'The sheet has no pressure for each lift, so nobody can tell whether it held.' }
  const least = now.run.points.find(point => point.pressurePa === steady.leastPa)
  const lifts = steady.saggedLiftsMm.length > 0 ? steady.saggedLiftsMm : least ? [least.liftMm] : []
  return {
    values: [flowValue({ value: steady.driftPercent, unit: '%', trace: [{ what: 'greatest less least pressure, over the greatest', sum: `100 x (${steady.greatestPa.toFixed(0)} - ${steady.leastPa.toFixed(0)}) / ${steady.greatestPa.toFixed(0)}`, gives: `${steady.driftPercent.toFixed(1)} %` }] })],
    ...(steady.onlyTop ? { finding: 'Top' } : {}),
    fill: () => ({ lifts: listInWords(lifts.map(liftInWords)) }),
  }
}

const inchOfWater = referenceBasis.pressurePa / 28
