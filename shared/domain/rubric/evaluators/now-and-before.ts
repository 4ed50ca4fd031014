import type { LiftChange } from '../../airflow/change-per-lift'
import type { TraceStep } from '../../uncertainty/evaluated'
import type { EvidenceSet, JudgedUnit, NotAssessed } from '../evidence'
import { baselineOf, runOf, type SheetRun } from '../flow-evidence'
import { liftInWords, unitInWords } from '../words'

/** Now and the baseline of the same port, or why one is missing. */
export function nowAndBefore(evidence: EvidenceSet, unit: JudgedUnit): { now: SheetRun, before: SheetRun } | NotAssessed {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return { notAssessed: `There is no flow sheet of this stage for ${unitInWords(unit)} yet.` }
  const before = baselineOf(evidence, { cylinder: now.run.cylinder ?? unit.cylinder, side: now.run.side })
  if (!before) return { notAssessed: `There is no baseline sheet of ${unitInWords({ cylinder: now.run.cylinder, side: now.run.side })} to hold this one against.` }
  return { now, before }
}

/** Every lift on a line of its own, so that a person can follow the verdict. */
export function perLiftTrace(changes: readonly LiftChange[]): TraceStep[] {
  return changes.map(change => ({
    what: `change at ${liftInWords(change.liftMm)}`,
    sum: `${change.nowCfm28.toFixed(2)} - ${change.beforeCfm28.toFixed(2)} cfm`,
    gives: `${change.changeCfm.toFixed(2)} ± ${change.expandedUncertainty.toFixed(2)} cfm (${change.changePercent.toFixed(1)} %): ${change.verdict}`,
  }))
}
