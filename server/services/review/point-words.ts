import { partsOfStage } from '#shared/domain/rubric/covers'
import type { Rubric, RubricPoint, RubricStage } from '#shared/domain/rubric/criterion'
import type { SubmissionPart } from '#shared/domain/rubric/evidence'

/** The point with that code and the stage it falls on. */
export function findPoint(rubric: Rubric, code: string): { stage: RubricStage, point: RubricPoint } | null {
  for (const stage of rubric.stages) {
    const point = stage.points.find(one => one.code === code)
    if (point) return { stage, point }
  }
  return null
}

/** The part of the route that is due once a point is released; null when nothing comes after. */
export function nextPart(rubric: Rubric, code: string): { op: number, name: string, part: SubmissionPart } | null {
  const found = findPoint(rubric, code)
  if (!found) return null
  const { stage, point } = found
  if (point.when !== 'after') return { op: stage.op, name: stage.name, part: 'rest' }
  const next = rubric.stages.find(one => one.op > stage.op)
  return next ? { op: next.op, name: next.name, part: partsOfStage(next)[0] ?? 'rest' } : null
}
