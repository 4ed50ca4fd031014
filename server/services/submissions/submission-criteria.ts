import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import type { Submission } from '#server/db/entities/Submission'
import { criterionViews } from '#server/services/review/criterion-views'
import { newestOverrides } from '#server/services/review/point-results'
import type { CriterionView } from '#shared/contract/views'
import { criteriaOfPart } from '#shared/domain/rubric/covers'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'

/** The criteria a submission was judged on with the results of its newest complete set; none before the first. */
export async function submissionCriteria(em: EntityManager, submission: Loaded<Submission, 'head.rubric'>): Promise<CriterionView[]> {
  if (!submission.scoredVersion) return []
  const { rubric } = submission.head.$.rubric.$
  const results = await em.find(CriterionResult, { set: { submission: submission.id, version: submission.scoredVersion } }, { orderBy: { position: 'asc' } })
  const overrides = await newestOverrides(em, results.map(one => one.id))
  const criteria = criteriaOfPart(stageAsDue(rubric, submission.op), submission.part)
  return criterionViews(rubric, criteria, results.map(result => ({ result, submission, override: overrides.get(result.id) ?? null })))
}
