import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { PointRelease } from '#server/db/entities/PointRelease'
import { PhotoPin, type Review } from '#server/db/entities/Review'
import { stageNames } from '#server/services/school/stage-names'
import type { FeedbackView } from '#shared/contract/views'
import { pointName } from '#shared/domain/rubric/route-state'

export type LoadedReview = Loaded<Review, 'by' | 'submission' | 'submission.head'>

/** Reviews as people read them. Each comes with its person, submission and head. */
export async function feedbackViews(em: EntityManager, reviews: readonly LoadedReview[]): Promise<FeedbackView[]> {
  if (reviews.length === 0) return []
  const ids = reviews.map(review => review.id)
  const pins = await em.find(PhotoPin, { review: { $in: ids } }, { orderBy: { number: 'asc' } })
  const stageName = await stageNames(em, reviews.map(review => review.submission.$.head.$.rubric.id))
  const releases = await em.find(PointRelease, { review: { $in: ids } })
  return reviews.map((review) => {
    const submission = review.submission.$
    const head = submission.head.$
    return {
      id: review.id,
      submissionId: submission.id,
      head: head.number,
      op: submission.op,
      stageName: stageName(head.rubric.id, submission.op),
      point: review.point ?? null,
      pointName: review.point ? pointName(review.point) : null,
      try: submission.tryNumber,
      decision: review.decision,
      by: review.by.$.name,
      at: review.at.toISOString(),
      condition: review.condition ?? null,
      conditions: releases.find(release => release.review.id === review.id)?.conditions.map(condition => condition.text) ?? [],
      feedback: review.feedback,
      score: submission.score ?? null,
      word: submission.word ?? null,
      sentences: review.sentences.map(({ criterion, title, cylinder, side, at, state, text, edited }) => ({ criterion, title, cylinder, side, at, state, text, edited })),
      pins: pins.filter(pin => pin.review.id === review.id).map(pin => ({ number: pin.number, photoId: pin.photo.id, x: pin.x, y: pin.y, criterion: pin.criterion, text: pin.text })),
      readAt: review.readAt?.toISOString() ?? null,
    }
  })
}
