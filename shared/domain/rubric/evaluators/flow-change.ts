import { changeAtLift, changePerLift, type LiftChange } from '../../airflow/change-per-lift'
import { flowLossVerdict } from '../../airflow/flow-loss-verdict'
import { liftWeightedFlow } from '../../airflow/lift-weighted-flow'
import { namedLift } from '../../airflow/named-lift'
import type { TraceStep } from '../../uncertainty/evaluated'
import type { EvidenceSet, Evaluator, JudgedUnit, NotAssessed } from '../evidence'
import { baselineOf, runOf, type SheetRun, valveHeadMm } from '../flow-evidence'
import { pickBands } from '../pick-band'
import { liftInWords, listInWords, unitInWords } from '../words'

/** Now and the baseline of the same port, or why one is missing. */
function nowAndBefore(evidence: EvidenceSet, unit: JudgedUnit): { now: SheetRun, before: SheetRun } | NotAssessed {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return { notAssessed: `There is no flow sheet of this stage for ${unitInWords(unit)} yet.` }
  const before = baselineOf(evidence, { cylinder: now.run.cylinder ?? unit.cylinder, side: now.run.side })
  if (!before) return { notAssessed: `There is no baseline sheet of ${unitInWords({ cylinder: now.run.cylinder, side: now.run.side })} to hold this one against.` }
  return { now, before }
}

function perLiftTrace(changes: readonly LiftChange[]): TraceStep[] {
  return changes.map(change => ({
    what: `change at ${liftInWords(change.liftMm)}`,
    sum: `${change.nowCfm28.toFixed(2)} - ${change.beforeCfm28.toFixed(2)} cfm`,
    gives: `${change.changeCfm.toFixed(2)} ± ${change.expandedUncertainty.toFixed(2)} cfm (${change.changePercent.toFixed(1)} %): ${change.verdict}`,
  }))
}

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

/**
 * Gain over the baseline, per cent: at the lifts the bands name, or the largest at any lift.
 *
 * Source: handbook 3.5; named lifts 3, lift rule.
 */
export const flowGain: Evaluator = (evidence, criterion, unit) => {
  const runs = nowAndBefore(evidence, unit)
  if ('notAssessed' in runs) return runs
  const { now, before } = runs
  const shares = pickBands(criterion, evidence.casting.scope, unit.side).map(band => band.liftShare).filter((share): share is number => share !== null)
  if (shares.length === 0) {
    const changes = changePerLift(now.run, before.run)
    const [largest] = [...changes].sort((a, b) => b.changePercent - a.changePercent)
    return largest ? { values: [asGain(largest, perLiftTrace(changes))] } : { notAssessed: 'The two sheets have no lift in common.' }
  }
  const valveMm = valveHeadMm(evidence, now.sheet.header, unit.side ?? 'intake')
  const missing: string[] = []
  const values = shares.flatMap((share) => {
    const liftMm = namedLift(valveMm, share)
    const change = changeAtLift(now.run, before.run, liftMm)
    if (change) return [{ ...asGain(change, [{ what: `named lift, ${share} of the valve`, sum: `${share} x ${valveMm.toFixed(1)} mm`, gives: liftInWords(liftMm) }, ...change.trace]), liftShare: share }]
    missing.push(`a point near ${liftInWords(liftMm)} on both sheets`)
    return []
  })
  if (values.length === 0) return { notAssessed: `Still wanted: ${missing.join(', ')}.` }
  return missing.length === 0 ? { values } : { values, missing }
}

function asGain(change: LiftChange, trace: TraceStep[]) {
  return { value: change.changePercent, unit: '%', standardUncertainty: change.expandedUncertaintyPercent / 2, degreesOfFreedom: null, at: null, liftMm: change.liftMm, trace }
}

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
