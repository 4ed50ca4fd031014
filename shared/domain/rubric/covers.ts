import type { CastingCard } from '../geometry/casting'
import type { PortRef } from '../units/port'
import type { Criterion, RubricPoint, RubricStage } from './criterion'
import type { SubmissionPart } from './evidence'

/** Part of its stage a point falls on. The last cut is a cut still to come, so its proof is a "before". */
export function partOfPoint(point: RubricPoint): SubmissionPart {
  return point.when === 'first' ? 'first' : point.when === 'after' ? 'rest' : 'before'
}

/** Parts of a stage in the order they are due: one for each of its points that falls earlier, and always the rest. */
export function partsOfStage(stage: RubricStage): SubmissionPart[] {
  const early = stage.points.map(partOfPoint)
  const parts: SubmissionPart[] = ['before', 'first', 'rest']
  return parts.filter(part => part === 'rest' || (early.includes(part) && criteriaOfPart(stage, part).length > 0))
}

/**
 * Criteria of a stage that are due with a part: before the first article or the first cut those its points of that part
 * name ("T-01", or the whole stage by its code); with the rest, all of the stage.
 */
export function criteriaOfPart(stage: RubricStage, part: SubmissionPart): Criterion[] {
  if (part === 'rest') return stage.criteria
  const needs = stage.points.filter(point => partOfPoint(point) === part).flatMap(point => point.needs)
  return stage.criteria.filter(criterion => needs.includes(stage.code) || needs.includes(criterion.id))
}

/**
 * Ports a part covers.
 *
 * A first article is one cylinder where most of the stage's criteria are of a cylinder (a chamber), else one port: the intake of
 * the cylinder worked first, because the course cuts intake before exhaust. The rest is every port, the first article's again
 * among them, because the head is judged as it then stands; so is "before".
 *
 * @throws {RangeError} when the cylinder worked first is not one of the casting's
 */
export function portsOfPart(stage: RubricStage, part: SubmissionPart, casting: Pick<CastingCard, 'cylinders'>, firstCylinder: number): PortRef[] {
  if (!Number.isInteger(firstCylinder) || firstCylinder < 1 || firstCylinder > casting.cylinders) throw new RangeError(`the casting has no cylinder ${firstCylinder}`)
  const all = Array.from({ length: casting.cylinders }, (_, index): PortRef[] => [
    { cylinder: index + 1, side: 'intake' }, { cylinder: index + 1, side: 'exhaust' },
  ]).flat()
  if (part !== 'first') return all
  const ofCylinder = stage.criteria.filter(criterion => criterion.wants.some(want => want.per === 'cylinder'))
  const ofPort = stage.criteria.filter(criterion => criterion.wants.some(want => want.per === 'port'))
  const first = all.filter(port => port.cylinder === firstCylinder)
  return ofCylinder.length > ofPort.length ? first : first.filter(port => port.side === 'intake')
}
