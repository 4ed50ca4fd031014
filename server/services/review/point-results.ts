import type { EntityManager } from '@mikro-orm/postgresql'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import { Override } from '#server/db/entities/Review'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import { Submission, submissionParts } from '#server/db/entities/Submission'
import type { Criterion } from '#shared/domain/rubric/criterion'

/** A result that counts now, the submission that made it, and the person's state beside it. */
export interface StandingRow { result: CriterionResult, submission: Submission, override: Override | null }

/**
 * The newest results of some criteria over all submissions of a head, in the rubric's order.
 *
 * Each part of a stage judges its criteria at every port it covers, and a later part covers the earlier one's ports again: so for
 * each criterion the set of the latest part, and of that the latest try, counts whole.
 */
export async function pointResults(em: EntityManager, headId: string, criteria: readonly Criterion[]): Promise<StandingRow[]> {
  const submissions = await em.find(Submission, { head: headId, scoredVersion: { $ne: null } })
  const sets = await em.find(ScoreSet, { $or: submissions.map(one => ({ submission: one.id, version: one.scoredVersion })) })
  if (sets.length === 0) return []
  const results = await em.find(CriterionResult, { set: { $in: sets.map(set => set.id) }, criterion: { $in: criteria.map(one => one.id) } }, { orderBy: { position: 'asc' } })
  const overrides = await newestOverrides(em, results.map(result => result.id))

  const submissionOf = new Map(sets.map(set => [set.id, submissions.find(one => one.id === set.submission.id)]))
  return criteria.flatMap(({ id }) => {
    const rows = results.filter(result => result.criterion === id).flatMap((result): StandingRow[] => {
      const submission = submissionOf.get(result.set.id)
      return submission ? [{ result, submission, override: overrides.get(result.id) ?? null }] : []
    })
    const newest = rows.map(row => row.submission).sort(laterFirst)[0]
    return rows.filter(row => row.submission === newest)
  })
}

function laterFirst(one: Submission, other: Submission): number {
  return submissionParts.indexOf(other.part) - submissionParts.indexOf(one.part) || other.tryNumber - one.tryNumber || other.op - one.op
}

/** The newest override of each of some results. */
export async function newestOverrides(em: EntityManager, resultIds: readonly string[]): Promise<Map<string, Override>> {
  if (resultIds.length === 0) return new Map()
  const overrides = await em.find(Override, { result: { $in: [...resultIds] } }, { orderBy: { at: 'asc' }, populate: ['by'] })
  return new Map(overrides.map(override => [override.result.id, override]))
}
