import { viewReviewSheet } from '#server/services/review/view-review-sheet'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['instructor'],
  summary: 'What an instructor looks at to decide: criteria of the point, evidence, curves, earlier reviews, and what the release rule says.',
  params: idParams,
}, async ({ em, app, actor, params }) => viewReviewSheet(em, app, actor, params.id))
