import type { EntityManager } from '@mikro-orm/postgresql'
import { HeadStop, PointRelease, WitnessCall } from '#server/db/entities/PointRelease'
import type { Review } from '#server/db/entities/Review'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import { User } from '#server/db/entities/User'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { ReleaseCondition } from '#shared/domain/rubric/release-rule'
import { verdictFor, type PointCase } from './point-case'
import { pointName } from '#shared/domain/rubric/route-state'

/** Evidence and versions a release rests on, one entry for each set of results. */
export type RestsOn = ({ submission: string, version: number } & ScoreSet['restsOn'])[]

export interface Released {
  /** Whether the point is open now, or waits for another person. */
  complete: boolean
  conditions: ReleaseCondition[]
  restsOn: RestsOn
}

/**
 * Releases a point on behalf of one person, if the release rule allows it: writes who, when, on which evidence and versions, and the
 * conditions the program adds. A release by somebody else that was given on older evidence counts no longer.
 *
 * @throws {Refusal} release_forbidden with `refused`: each criterion, where, its state and why; and `needReason`
 */
export async function releasePoint(tx: EntityManager, app: App, actor: Actor, submission: FoundSubmission, given: PointCase, review: Review): Promise<Released> {
  const verdict = await verdictFor(tx, submission, given, actor.id, review.reasons)
  if (!verdict || !submission.point) throw new Refusal('point_not_due')
  if (!verdict.allowed) {
    const unreasoned = verdict.needReason.map((one) => {
      const row = given.rows.find(({ result }) => result.criterion === one.criterion && (result.cylinder ?? null) === one.cylinder && (result.side ?? null) === one.side)
      return { ...one, at: null, state: row?.override?.state ?? row?.result.state ?? 'not-assessed', why: `${titleOf(given, one.criterion)}: a must that is not accepted; say why it may be released all the same.` }
    })
    throw new Refusal('release_forbidden', undefined, { refused: [...verdict.refused, ...unreasoned], needReason: verdict.needReason })
  }
  for (const outdated of given.outdated) outdated.shutAgainAt = review.at

  const restsOn = await restsOnOf(tx, given)
  tx.persist(tx.create(PointRelease, {
    head: submission.head, point: submission.point, review, by: tx.getReference(User, actor.id), at: review.at, restsOn, conditions: verdict.conditions, condition: review.condition, shutAgainAt: null,
  }))
  if (verdict.complete) {
    await liftStopsOf(tx, actor, submission, submission.point, review)
    const call = await tx.findOne(WitnessCall, { head: submission.head.id, point: submission.point, seenAt: null })
    if (call) Object.assign(call, { seenBy: tx.getReference(User, actor.id), seenAt: review.at })
  }
  await enqueue(app, tx, 'seal-audit', { reason: `release:${review.id}` }, { singletonKey: `release:${review.id}` })
  return { complete: verdict.complete, conditions: verdict.conditions, restsOn }
}

function titleOf({ criteria }: PointCase, id: string): string {
  return criteria.find(criterion => criterion.id === id)?.title ?? id
}

async function restsOnOf(tx: EntityManager, { rows }: PointCase): Promise<RestsOn> {
  const sets = await tx.find(ScoreSet, { id: { $in: [...new Set(rows.map(row => row.result.set.id))] } }, { populate: ['restsOn'], orderBy: { scoredAt: 'asc' } })
  return sets.map(set => ({ submission: set.submission.id, version: set.version, ...set.restsOn }))
}

/** A stop called at a point ends with that point's release. */
async function liftStopsOf(tx: EntityManager, actor: Actor, submission: FoundSubmission, point: string, review: Review): Promise<void> {
  const stops = await tx.find(HeadStop, { head: submission.head.id, point, liftedAt: null })
  for (const stop of stops) {
    Object.assign(stop, { liftedBy: tx.getReference(User, actor.id), liftedAt: review.at, liftReason: `${pointName(point)} was released.` })
    recordEvent(tx, { actor: actor.id, action: 'stop-lifted', subject: `head:${submission.head.id}`, detail: { stop: stop.id, byReview: review.id } })
  }
}
