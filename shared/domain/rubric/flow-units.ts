import type { Criterion } from './criterion'
import type { EvidenceSet, JudgedUnit } from './evidence'
import { baselineOf, cylinderRun, runOf } from './flow-evidence'
import { pickBands } from './pick-band'

const sides = ['intake', 'exhaust'] as const

/** Sides a flow criterion has sheets wanted of, a band for, and ports covered. */
function sidesOf(criterion: Criterion, evidence: EvidenceSet): ('intake' | 'exhaust')[] {
  return sides.filter(side => evidence.ports.some(port => port.side === side)
    && pickBands(criterion, evidence.casting.scope, side).length > 0
    && criterion.wants.some(want => want.kind === 'flow-sheet' && (want.side === undefined || want.side === side)))
}

/** One result a side of the head, at the cylinder that was run. */
export function sideUnits(criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  return sidesOf(criterion, evidence).map(side => ({ cylinder: cylinderRun(evidence, side), side }))
}

/**
 * Where something is held against a baseline: one result a side; with a sheet of every cylinder wanted, one for each port that has
 * a baseline, because a port never run before cannot have lost. A side without any baseline still has its one, not assessed.
 */
export function changeUnits(criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  if (!criterion.wants.some(want => want.kind === 'flow-sheet' && want.per === 'cylinder')) return sideUnits(criterion, evidence)
  return sidesOf(criterion, evidence).flatMap((side): JudgedUnit[] => {
    const ports = evidence.ports.filter(port => port.side === side && (baselineOf(evidence, port)?.run.cylinder ?? null) === port.cylinder)
    return ports.length > 0 ? ports : [{ cylinder: cylinderRun(evidence, side), side }]
  })
}

/** One result a cylinder that was run on either side now; one for the head when none was. */
export function cylinderUnits(_criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  const cylinders = [...new Set(evidence.ports.map(port => port.cylinder))]
    .filter(cylinder => sides.some(side => runOf(evidence, evidence.op, { cylinder, side })?.run.cylinder === cylinder))
  return cylinders.length > 0 ? cylinders.map(cylinder => ({ cylinder, side: null })) : [{ cylinder: null, side: null }]
}

/** One result a side of the head over all its cylinders. */
export function headSideUnits(criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  return sidesOf(criterion, evidence).map(side => ({ cylinder: null, side }))
}

/** One result for the head. */
export function headUnit(): JudgedUnit[] {
  return [{ cylinder: null, side: null }]
}

/** One result a cylinder the part covers. */
export function everyCylinder(_criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  return [...new Set(evidence.ports.map(port => port.cylinder))].map(cylinder => ({ cylinder, side: null }))
}
