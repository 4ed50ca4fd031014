import { changeAtLift, changePerLift, type LiftChange } from '../../airflow/change-per-lift'
import { namedLift } from '../../airflow/named-lift'
import type { TraceStep } from '../../uncertainty/evaluated'
import type { Evaluator } from '../evidence'
import { valveHeadMm } from '../flow-evidence'
import { pickBands } from '../pick-band'
import { liftInWords } from '../words'
import { nowAndBefore, perLiftTrace } from './now-and-before'

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
