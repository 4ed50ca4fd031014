import type { Rubric, RubricStage } from './criterion'

/**
 * A stage with the criteria that are due with it: those of other stages whose `dueAt` is one of its points come in, its own that
 * are due at another stage's point go out (the pressure test of the teardown is done before the last hold is asked for).
 *
 * @throws {RangeError} when the rubric has no stage of that op
 */
export function stageAsDue(rubric: Rubric, op: number): RubricStage {
  const stage = rubric.stages.find(one => one.op === op)
  if (!stage) throw new RangeError(`the rubric has no stage at op ${op}`)
  const codes = stage.points.map(point => point.code)
  const own = stage.criteria.filter(criterion => criterion.dueAt === undefined || codes.includes(criterion.dueAt))
  const guests = rubric.stages.filter(one => one !== stage).flatMap(one => one.criteria)
    .filter(criterion => criterion.dueAt !== undefined && codes.includes(criterion.dueAt))
  return { ...stage, criteria: [...own, ...guests] }
}
