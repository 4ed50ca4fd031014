import type { Criterion } from './criterion'
import type { EvidenceSet, JudgedUnit } from './evidence'
import { evaluatorOf, unitsByWants } from './evaluators'
import { pickBands } from './pick-band'

/**
 * What a criterion has a result for in this submission: the ports, cylinders or sides it is judged at, among those the part covers.
 * Empty where the part covers none of them (an exhaust criterion with an intake first article).
 */
export function unitsOf(criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  const units = evaluatorOf(criterion)?.units?.(criterion, evidence) ?? unitsByWants(criterion, evidence)
  // A band for both sides of this casting covers a result without a side; a band of one side covers only that one.
  return units.filter(unit => pickBands(criterion, evidence.casting.scope, unit.side).length > 0)
}
