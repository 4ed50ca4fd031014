import type { EntityManager } from '@mikro-orm/postgresql'
import { Review } from '#server/db/entities/Review'
import { feedbackViews } from '#server/services/feedback/feedback-views'
import { curveSets } from '#server/services/heads/curve-sets'
import { evidenceViews } from '#server/services/submissions/evidence-views'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import { viewSubmission } from '#server/services/submissions/view-submission'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { ReviewSheetView, SubmissionView } from '#shared/contract/views'
import { pointName } from '#shared/domain/rubric/route-state'
import { criterionViews } from './criterion-views'
import { findForReview } from './lock-for-review'
import { loadPointCase, verdictFor, type PointCase } from './point-case'
import { proposedFeedback } from './proposed-feedback'

/**
 * What an instructor looks at to decide: the criteria the point needs, whichever stage scored them, stops first; the evidence of every
 * submission it covers; curves; earlier reviews; and what the release rule would say now.
 *
 * @throws {Refusal} submission_not_found
 */
export async function viewReviewSheet(em: EntityManager, app: App, actor: Actor, id: string): Promise<ReviewSheetView> {
  const { submission, mayPoints } = await findForReview(em, actor, id, app.clock.schoolNow())
  const head = submission.head.$
  const loaded = await loadPointCase(em, submission)
  const criteria = criterionViews(loaded.rubric, loaded.criteria, loaded.rows)
  const verdict = await verdictFor(em, submission, loaded, actor.id, [])
  const tries = await em.find(Review, { submission: { head: head.id, op: submission.op, part: submission.part } }, { populate: ['by', 'submission', 'submission.head'], strategy: 'select-in', orderBy: { at: 'asc', id: 'asc' } })
  return {
    submission: await withOthersEvidence(em, actor, await viewSubmission(em, app, actor, id), loaded),
    criteria,
    proposedFeedback: proposedFeedback(head.student.$.name, criteria),
    curves: await curveSets(em, head),
    reviews: await feedbackViews(em, tries),
    release: {
      allowed: verdict?.allowed ?? false,
      refused: (verdict?.refused ?? []).map(one => ({ ...one, state: one.state ?? '' })),
      needReason: verdict?.needReason ?? [],
      conditions: verdict?.conditions.map(one => one.text) ?? [],
    },
    maySign: maySign(actor, submission, mayPoints, loaded),
    signedBefore: loaded.signedBefore.map(release => ({ by: release.by.$.name, at: release.at.toISOString() })),
    others: loaded.others.map(other => ({
      id: other.id,
      op: other.op,
      stageName: loaded.rubric.stages.find(stage => stage.op === other.op)?.name ?? '',
      part: other.part,
      version: other.version,
      state: other.state,
      score: other.score ?? null,
      word: other.word ?? null,
    })),
  }
}

/** Stages without a point bring their proof to the point that decides them. */
async function withOthersEvidence(em: EntityManager, actor: Actor, view: SubmissionView, { others }: PointCase): Promise<SubmissionView> {
  const more = await evidenceViews(em, actor, { studentId: view.head.student.id, taught: true }, others.map(other => other.id))
  return {
    ...view,
    photos: [...view.photos, ...more.photos],
    readings: [...view.readings, ...more.readings],
    sheets: [...view.sheets, ...more.sheets],
    documents: [...view.documents, ...more.documents],
  }
}

function maySign(actor: Actor, submission: FoundSubmission, mayPoints: ReadonlySet<string>, { signedBefore, others }: PointCase): ReviewSheetView['maySign'] {
  const no = (why: string) => ({ may: false, why })
  if (submission.head.$.student.id === actor.id) return no('This is your own work; somebody else reviews it.')
  if (submission.state === 'decided') return no('This is decided.')
  if (submission.state === 'draft') return no('The student has not asked yet.')
  if (!submission.point) return no('This stage has no point of its own. It is decided with the next one that needs it; you may send it back or stop it.')
  if (!mayPoints.has(submission.point)) return no(`You may not sign ${pointName(submission.point)} in this cohort; you may stop the work.`)
  if (signedBefore.some(release => release.by.id === actor.id)) return no(`You have released ${pointName(submission.point)}. It waits for another person.`)
  if ([submission, ...others].some(one => one.scoredVersion !== one.version)) return no('It is being scored; wait a moment.')
  return { may: true, why: null }
}
