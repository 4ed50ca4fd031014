import cautions from '../../../content/school/cautions.json'
import strokes from '../../../content/school/strokes.json'
import type { SubmissionPart } from '#shared/domain/rubric/evidence'

/** The one line that is never left out where a stroke is offered (handbook 7). */
export const shortCaution = cautions.short

/** Caution lines of a stage: the short one first; stages that work near a wall end with the words for thin walls. */
export function cautionLines(op: number): string[] {
  const stages: Record<string, string[]> = cautions.stages
  return [cautions.short, ...stages[op] ?? [], ...cautions.wallStages.includes(op) ? [cautions.thinWalls] : []]
}

/** The stroke a part of a stage allows, in plain words. Empty for a stage the school has no words for. */
export function strokeWords(op: number, part: SubmissionPart): string {
  const stages: Record<string, Partial<Record<SubmissionPart, string>>> = strokes
  return stages[op]?.[part] ?? stages[op]?.rest ?? ''
}
