import type { EntityManager } from '@mikro-orm/postgresql'
import { Photo } from '#server/db/entities/Photo'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import type { Submission } from '#server/db/entities/Submission'
import { signal } from '#server/utils/signals'
import { instructorGives } from '#shared/domain/rubric/instructor-gives'
import { finalScore } from './final-score'
import type { PointCase } from './point-case'
import { newestOverrides, type StandingRow } from './point-results'
import { standingState } from './standing-state'

type Decision = 'release' | 'send-back' | 'stop'

/**
 * Closes what a review decided: the submission, and with a release every submission without a point that the point covers. Sent back,
 * those of them are closed too that hold a must that was not met, so that they get a next try; the others stay as they are. A must
 * only a person can judge and nobody judged yet is not the student's to bring again.
 * Score and word become the person's; releases of this try that waited for a second person count no longer unless it was released.
 */
export async function closeSubmissions(tx: EntityManager, submission: Submission, given: PointCase, decision: Decision, now: Date): Promise<void> {
  const { others, rubric, criteria, rows } = given
  const isUnmet = (other: Submission): boolean => rows.some((row) => {
    const criterion = criteria.find(one => one.id === row.result.criterion)
    const state = standingState(row)
    return row.submission === other && criterion !== undefined && (criterion.mustPass || criterion.safetyStop)
      && (state === 'reject' || (state === 'not-assessed' && !instructorGives(criterion)))
  })
  const closing = [submission, ...others.filter(other => decision === 'release' || (decision === 'send-back' && isUnmet(other)))]
  for (const one of closing) {
    const own = await ownRows(tx, one, rows)
    Object.assign(one, { state: 'decided', decision, decidedAt: now, ...finalScore(rubric, one, own) })
    await signal(tx, { kind: 'submission', id: one.id })
  }
  if (decision !== 'release') for (const release of [...given.signedBefore, ...given.outdated]) release.shutAgainAt = now
  await tx.nativeUpdate(Photo, { submission: { $in: closing.map(one => one.id) }, state: { $in: ['taken', 'measured'] }, setAsideAt: null }, { state: 'reviewed' })
}

/** All results of a submission, with the overrides of this review, which are not written yet, before those of earlier ones. */
async function ownRows(tx: EntityManager, submission: Submission, rows: readonly StandingRow[]): Promise<StandingRow[]> {
  const set = await tx.findOne(ScoreSet, { submission: submission.id, version: submission.scoredVersion ?? 0 })
  if (!set) return []
  const results = await tx.find(CriterionResult, { set: set.id }, { orderBy: { position: 'asc' } })
  const earlier = await newestOverrides(tx, results.map(result => result.id))
  return results.map(result => ({ result, submission, override: rows.find(row => row.result === result)?.override ?? earlier.get(result.id) ?? null }))
}
