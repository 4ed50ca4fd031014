import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import type { PracticeHead } from '#server/db/entities/PracticeHead'
import { Override } from '#server/db/entities/Review'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import type { Submission } from '#server/db/entities/Submission'
import type { Criterion, RubricStage } from '#shared/domain/rubric/criterion'

export interface CollectedResult {
  result: CriterionResult
  submission: Submission
  stage: RubricStage
  criterion: Criterion
  /** Newest override of this very result. */
  override: Loaded<Override, 'by'> | null
}

const parts = ['rest', 'first', 'before'] as const

/**
 * The results that stand for what a point needs: of every stage code or criterion id in `needs`, those of the newest score set of
 * the head's submissions. Where several parts judged one criterion at one unit, the later part's stand (the rest of a stage judges
 * the first article again as it then is).
 */
export async function collectResults(em: EntityManager, head: Loaded<PracticeHead, 'rubric'>, needs: readonly string[]): Promise<CollectedResult[]> {
  const stages = head.rubric.$.rubric.stages
  const wanted = new Map(stages.flatMap(stage => stage.criteria.filter(one => needs.includes(stage.code) || needs.includes(one.id)).map(criterion => [criterion.id, { stage, criterion }] as const)))
  const sets = await newestSets(em, head.id)
  if (sets.length === 0 || wanted.size === 0) return []
  const results = await em.find(CriterionResult, { set: { $in: sets.map(set => set.id) }, criterion: { $in: [...wanted.keys()] } }, { orderBy: { position: 'asc' } })
  const overrides = await em.find(Override, { result: { $in: results.map(one => one.id) } }, { populate: ['by'], orderBy: { at: 'desc' } })
  const submissionOf = new Map(sets.map(set => [set.id, set.submission.$]))
  const standing = new Map<string, string>()
  const rows = results.flatMap((result): CollectedResult[] => {
    const submission = submissionOf.get(result.set.id)
    const found = wanted.get(result.criterion)
    if (!submission || !found) return []
    return [{ result, submission, ...found, override: overrides.find(one => one.result.id === result.id) ?? null }]
  }).sort((a, b) => parts.indexOf(a.submission.part) - parts.indexOf(b.submission.part) || a.submission.op - b.submission.op || a.result.position - b.result.position)
  return rows.filter(({ result, submission }) => {
    const unit = `${result.criterion}|${result.cylinder}|${result.side}`
    const first = standing.get(unit)
    if (first === undefined) standing.set(unit, submission.id)
    return first === undefined || first === submission.id
  })
}

/** The newest score set of each stage and part of a head, with its submission. */
export async function newestSets(em: EntityManager, headId: string): Promise<Loaded<ScoreSet, 'submission'>[]> {
  const sets = await em.find(ScoreSet, { submission: { head: headId } }, { populate: ['submission'], orderBy: { submission: { op: 'asc', tryNumber: 'desc' }, version: 'desc' } })
  const seen = new Set<string>()
  return sets.filter((set) => {
    const key = `${set.submission.$.op}|${set.submission.$.part}`
    return !seen.has(key) && seen.add(key)
  })
}
