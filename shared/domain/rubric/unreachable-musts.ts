import { unreachableBands, type Unreachable } from './unreachable-bands'
import type { Rubric } from './criterion'

/** Every must of a rubric that has no acceptable value; a version with any is refused when it is saved. */
export function unreachableMusts(rubric: Rubric): Unreachable[] {
  return rubric.stages.flatMap(stage => stage.criteria).filter(criterion => criterion.mustPass).flatMap(unreachableBands)
}
