import type { EntityManager } from '@mikro-orm/postgresql'
import { Review } from '#server/db/entities/Review'
import { User } from '#server/db/entities/User'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { signal } from '#server/utils/signals'
import type { ReviewInput } from '#shared/contract/inputs'
import type { ReviewAnswer } from '#shared/contract/views'
import { applyOverrides } from './apply-overrides'
import { changedSince } from './changed-since'
import { closeSubmissions } from './close-submissions'
import { lockForReview } from './lock-for-review'
import { placePins } from './place-pins'
import { loadPointCase, type PointCase } from './point-case'
import { pointName } from '#shared/domain/rubric/route-state'
import { releasePoint, type Released } from './release-point'
import { sentencesFor } from './sentences-for'
import { stopAtReview } from './stop-at-review'
import { tellReleased, tellSentBack, tellStopped } from './tell-student'

/**
 * An instructor's decision on a submission: release, send back or stop, with overrides, pins and sentences. Everything it changes,
 * the message to the student and the audit record are one transaction.
 *
 * @throws {Refusal} submission_not_found, own_work, submission_decided, submission_not_scored, review_stale, point_not_due,
 *   point_not_yours, override_outside, override_not_allowed, pin_outside, words_needed, or release_forbidden with what stands against it
 */
export async function decideReview(em: EntityManager, app: App, actor: Actor, id: string, input: ReviewInput): Promise<ReviewAnswer> {
  return em.transactional(async (tx) => {
    const now = app.clock.schoolNow()
    const { submission, mayPoints } = await lockForReview(tx, actor, id, now)
    if (submission.head.$.student.id === actor.id) throw new Refusal('own_work')
    const loaded = await loadPointCase(tx, submission)
    await refuseUnseen(tx, submission, loaded, input)
    refusePoint(submission, mayPoints, input)

    const review = tx.create(Review, {
      submission, seenVersion: input.seen, by: tx.getReference(User, actor.id), at: now, decision: input.decision, point: submission.point,
      condition: input.condition || null, feedback: input.feedback, sentences: [], reasons: input.reasons, readAt: null,
    })
    tx.persist(review)
    const rows = applyOverrides(tx, review, loaded.rows, loaded.criteria, input.overrides, actor.id, now)
    const decided = { ...loaded, rows }
    review.sentences = sentencesFor(rows, loaded.criteria, input.sentences ?? [])
    await placePins(tx, review, [submission.id, ...loaded.others.map(other => other.id)], loaded.criteria, input.pins)

    const released = input.decision === 'release' ? await releasePoint(tx, app, actor, submission, decided, review) : null
    if (input.decision === 'release') {
      if (released?.complete) {
        await closeSubmissions(tx, submission, decided, 'release', now)
        await tellReleased(tx, app, actor, review, submission, decided, released.conditions.map(one => one.text))
      }
    }
    else {
      const stop = input.decision === 'stop' ? await stopAtReview(tx, actor, submission, decided, review) : null
      await closeSubmissions(tx, submission, decided, input.decision, now)
      if (stop) await tellStopped(tx, app, actor, review, submission, decided, stop)
      else await tellSentBack(tx, app, actor, review, submission, decided)
    }
    recordReview(tx, actor, review, submission, decided, input, released)
    await signal(tx, { kind: 'submission', id: submission.id })
    await tx.flush()
    return {
      review: review.id,
      decision: review.decision,
      point: review.point ?? null,
      complete: released?.complete ?? true,
      conditions: released?.conditions.map(one => one.text) ?? [],
      submission: { id: submission.id, state: submission.state, version: submission.version, score: submission.score ?? null, word: submission.word ?? null },
    }
  })
}

/** What is decided must be what was looked at. */
async function refuseUnseen(tx: EntityManager, submission: FoundSubmission, { others }: PointCase, input: ReviewInput): Promise<void> {
  if (submission.state === 'decided') throw new Refusal('submission_decided', 'This submission is decided already.')
  if (submission.state === 'draft') throw new Refusal('submission_not_scored', 'The student has not asked for a release yet.')
  if (submission.version !== input.seen) throw new Refusal('review_stale', undefined, { version: submission.version, changed: await changedSince(tx, submission, input.seen) })
  const moved = others.filter(other => input.seenWith.some(seen => seen.id === other.id && seen.version !== other.version))
  if (moved.length > 0) {
    const changed: string[] = []
    for (const other of moved) changed.push(...(await changedSince(tx, other, input.seenWith.find(seen => seen.id === other.id)?.version ?? 0)).map(what => `op ${other.op}: ${what}`))
    throw new Refusal('review_stale', undefined, { version: submission.version, changed })
  }
  const unscored = [submission, ...others].find(one => one.scoredVersion !== one.version)
  if (unscored) throw new Refusal('submission_not_scored', `Op ${unscored.op} is still being scored. Wait a moment and look again.`)
}

/** A stop may be called by anybody who teaches the cohort; the rest by those who may sign the point. */
function refusePoint(submission: FoundSubmission, mayPoints: ReadonlySet<string>, input: ReviewInput): void {
  const point = submission.point ?? null
  if (input.point !== point && (input.point !== null || input.decision === 'release')) {
    throw new Refusal('point_not_due', point === null ? undefined : `This submission falls on ${pointName(point)}.`)
  }
  if (input.decision === 'release' && point === null) throw new Refusal('point_not_due', 'This stage has no point of its own; it is decided with the next one that needs it.')
  if (input.decision !== 'stop' && point !== null && !mayPoints.has(point)) throw new Refusal('point_not_yours')
}

function recordReview(tx: EntityManager, actor: Actor, review: Review, submission: FoundSubmission, { rows, others }: PointCase, input: ReviewInput, released: Released | null): void {
  const overridden = rows.filter(row => row.override?.review.id === review.id)
  recordEvent(tx, {
    actor: actor.id,
    action: `review-${input.decision}`,
    subject: `submission:${submission.id}`,
    detail: {
      review: review.id,
      head: submission.head.id,
      point: submission.point ?? null,
      version: submission.version,
      others: others.map(other => ({ id: other.id, version: other.version })),
      overrides: overridden.map(({ result, override }) => ({ result: result.id, criterion: result.criterion, from: result.state, to: override?.state })),
      reasonsFor: input.reasons.map(reason => reason.criterion),
      pins: input.pins.length,
      ...(released ? { restsOn: released.restsOn, complete: released.complete, conditions: released.conditions.map(one => ({ criterion: one.criterion, cylinder: one.cylinder, side: one.side, at: one.at })) } : {}),
    },
  })
}
