import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { z } from 'zod'
import { Review } from '#server/db/entities/Review'
import type { Actor } from '#server/utils/actor'
import { readPageToken, writePageToken } from '#server/utils/page-token'
import type { FeedbackView, Page, pageQuery } from '#shared/contract/views'
import { feedbackViews } from './feedback-views'

const keySchema = z.tuple([z.string().datetime(), z.string().uuid()])

/**
 * What instructors told a student about their own work, newest first. Words are read once the submission is decided: a first release of
 * two stays between the two.
 *
 * @throws {Refusal} page_unknown
 */
export async function listFeedback(em: EntityManager, actor: Actor, query: z.output<typeof pageQuery>): Promise<Page<FeedbackView>> {
  const own: FilterQuery<Review> = { submission: { state: 'decided', head: { student: actor.id } } }
  const after = query.after === undefined ? null : readPageToken(query.after, keySchema)
  const older: FilterQuery<Review> = after === null ? {} : { $or: [{ at: { $lt: new Date(after[0]) } }, { at: new Date(after[0]), id: { $lt: after[1] } }] }
  const reviews = await em.find(Review, { $and: [own, older] }, { populate: ['by', 'submission', 'submission.head'], strategy: 'select-in', orderBy: { at: 'desc', id: 'desc' }, limit: query.limit + 1 })
  const page = reviews.slice(0, query.limit)
  const last = page[page.length - 1]
  return { items: await feedbackViews(em, page), next: reviews.length > query.limit && last ? writePageToken([last.at.toISOString(), last.id]) : null }
}
