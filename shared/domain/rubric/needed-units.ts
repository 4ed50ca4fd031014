import type { CastingCard } from '../geometry/casting'
import type { PortRef } from '../units/port'
import type { RubricPoint, RubricStage } from './criterion'
import { doesNotApplyBecause } from './does-not-apply'
import type { EvidenceSet, JudgedUnit } from './evidence'
import { criteriaOfPoint } from './release-rule'
import { unitsOf } from './units-of'

/**
 * Every unit a point needs a result for: what `releaseVerdict` takes as `units`. A criterion that does not apply needs none.
 *
 * Where evidence decides the cylinder (one side of the head is flowed at one cylinder) the cylinder is null: any will do.
 */
export function neededUnits(point: RubricPoint, stages: readonly RubricStage[], casting: CastingCard, ports: readonly PortRef[], acidCleaned: boolean | null): { criterion: string, unit: JudgedUnit }[] {
  const nothingYet: EvidenceSet = { casting, op: 0, part: 'rest', ports: [...ports], readings: [], photos: [], documents: [], sheets: [], judged: [], acidCleaned, handAllowanceMm: 0 }
  return criteriaOfPoint(point, stages).filter(criterion => doesNotApplyBecause(criterion, nothingYet) === null)
    .flatMap(criterion => unitsOf(criterion, nothingYet).map(unit => ({ criterion: criterion.id, unit })))
}
