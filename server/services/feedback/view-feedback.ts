import type { EntityManager } from '@mikro-orm/postgresql'
import { Review } from '#server/db/entities/Review'
import { Submission } from '#server/db/entities/Submission'
import { staffLinks } from '#server/services/review/staff-links'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { FeedbackView } from '#shared/contract/views'
import { feedbackViews } from './feedback-views'

/**
 * All reviews of one submission, oldest first: for its student once decided, for an instructor of the cohort always. Nobody else sees
 * what was said, whatever other roles they have.
 *
 * @throws {Refusal} submission_not_found
 */
export async function viewFeedback(em: EntityManager, app: App, actor: Actor, submissionId: string): Promise<FeedbackView[]> {
  const taught = [...(await staffLinks(em, actor, app.clock.schoolNow())).keys()]
  const submission = await em.findOne(Submission, { id: submissionId, $or: [{ head: { student: actor.id } }, { head: { cohort: { $in: taught } } }] }, { populate: ['head'] })
  if (!submission) throw new Refusal('submission_not_found')
  const own = submission.head.$.student.id === actor.id
  if (own && submission.state !== 'decided') return []
  const reviews = await em.find(Review, { submission: submission.id }, { populate: ['by', 'submission', 'submission.head'], strategy: 'select-in', orderBy: { at: 'asc', id: 'asc' } })
  return feedbackViews(em, reviews)
}
