import type { EntityManager } from '@mikro-orm/postgresql'
import { HeadStop } from '#server/db/entities/PointRelease'
import type { Review } from '#server/db/entities/Review'
import { User } from '#server/db/entities/User'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'
import type { PointCase } from './point-case'
import type { StandingRow } from './point-results'
import { resultSpot } from './result-spot'
import { standingState } from './standing-state'

export interface CalledStop { stop: HeadStop, row: StandingRow | null }

/**
 * Puts a stop on the head, for the result that weighs most: a stop criterion before a must, rejected before borderline. Where no result
 * stands against the student's work the instructor's own words are the reason.
 *
 * @throws {Refusal} words_needed when there are neither
 */
export async function stopAtReview(tx: EntityManager, actor: Actor, submission: FoundSubmission, given: PointCase, review: Review): Promise<CalledStop> {
  const row = worstRow(given)
  const words = [review.feedback, review.condition ?? ''].find(text => text !== '') ?? ''
  if (row === null && words === '') throw new Refusal('words_needed', undefined, { issues: [{ path: 'feedback', message: 'say why you stop this' }] })
  const criterion = given.criteria.find(one => one.id === row?.result.criterion)
  const sentence = review.sentences.find(one => row && one.criterion === row.result.criterion && resultSpot(one) === resultSpot(row.result))?.text
  const stop = tx.create(HeadStop, {
    head: submission.head,
    by: tx.getReference(User, actor.id),
    at: review.at,
    criterion: criterion?.id ?? null,
    point: submission.point,
    where: (row ? resultSpot(row.result) : `op ${submission.op}, ${given.stage.name}`).slice(0, 200),
    reason: words || sentence || criterion?.title || '',
    liftedBy: null,
    liftedAt: null,
    liftReason: null,
  })
  tx.persist(stop)
  return { stop, row }
}

function worstRow({ rows, criteria }: PointCase): StandingRow | null {
  const weight = (row: StandingRow): number => {
    const criterion = criteria.find(one => one.id === row.result.criterion)
    const state = standingState(row)
    if (state !== 'reject' && state !== 'borderline') return 0
    const kind = criterion?.safetyStop ? 4 : criterion?.mustPass && state === 'reject' ? 2 : 0
    return kind === 0 ? 0 : kind + (state === 'reject' ? 1 : 0)
  }
  const [worst] = rows.filter(row => weight(row) > 0).sort((one, other) => weight(other) - weight(one))
  return worst ?? null
}
