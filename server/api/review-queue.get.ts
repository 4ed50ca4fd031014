import { listReviewQueue } from '#server/services/review/list-review-queue'
import { defineRoute } from '#server/utils/define-route'
import { queueQuery } from '#shared/contract/views'

export default defineRoute({
  access: ['instructor'],
  summary: 'Submissions that wait in the cohorts the caller teaches: stops first, then the longest waiting.',
  query: queueQuery,
}, async ({ em, app, actor, query }) => listReviewQueue(em, app, actor, query))
