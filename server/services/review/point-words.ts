import type { Rubric, RubricPoint, RubricStage } from '#shared/domain/rubric/criterion'

/** The point with that code and the stage it falls on. */
export function findPoint(rubric: Rubric, code: string): { stage: RubricStage, point: RubricPoint } | null {
  for (const stage of rubric.stages) {
    const point = stage.points.find(one => one.code === code)
    if (point) return { stage, point }
  }
  return null
}

/** The next stroke once a point is released, and the op whose lesson to read; null when nothing comes after. */
export function nextStroke(rubric: Rubric, code: string): { op: number, text: string } | null {
  const found = findPoint(rubric, code)
  if (!found) return null
  const { stage, point } = found
  const named = (one: RubricStage): string => `op ${one.op}, ${one.name}`
  if (point.when === 'before') return { op: stage.op, text: named(stage) }
  if (point.when === 'first') return { op: stage.op, text: `the rest of ${named(stage)}` }
  if (point.when === 'last-cut') return { op: stage.op, text: `the last cut of ${named(stage)}` }
  const next = rubric.stages.find(one => one.op > stage.op)
  return next ? { op: next.op, text: named(next) } : null
}
